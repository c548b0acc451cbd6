// Where notes begin, for placing cuts: found from how much the energy of several bands rises over a time longer than the
// period of the lowest string, so that the pulses of a low note are not taken for attacks. Energy-rise detection by bands
// follows Klapuri (1999), "Sound onset detection by applying psychoacoustic knowledge"; the place is then read from the
// envelope at a millisecond's grain.
import { realFft } from '@shared/audio/stretch/fft'
import type { SampleSource } from '@shared/audio/stretch/types'

export interface Onset {
  /** First frame of the attack, a moment early: here a new sound may begin. Of an end, its last frame, a moment late. */
  cut: number
  /** Where the ear puts the note: half way up the attack. */
  anchor: number
  /** Sum of the bands' rises (of an end, their falls), octaves of energy. */
  strength: number
  /** A sound breaks off here and none begins. */
  isEnd: boolean
}

export interface OnsetFinder {
  /** Onsets and ends whose cut lies in the half-open span, rising; null while the source has not got the frames. */
  between(from: number, to: number): readonly Onset[] | null
  /** Does a small part of the work that `between` needs for the span; true when nothing is left to do. */
  prepare(from: number, to: number): boolean
  /** Frames beyond an onset that finding it looks at. */
  readonly reach: number
}

const edgesHz = [0, 120, 250, 500, 1000, 2000, 4000, 8000, 16000]
const bandCount = edgesHz.length - 1
const weights = [1, 1, 1, 1, 1, 1, 1, 0.7]
/** Means before and after are taken over this long: two periods of the lowest string of a five-string bass (31 Hz). */
const meanSec = 0.064
/** No band's rise counts for more than this, octaves of energy. */
const riseCap = 4
/** Sum of rises from which on it is an onset. */
const threshold = 3
/** Sum of falls from which on a sound has broken off: far more than strings die away in that time. */
const endThreshold = 12
/** An end counts this long after an onset and before the next. */
const endApartSec = 0.06
/** Two onsets are at least this far apart. */
const apartSec = 0.03
const chunkFrames = 16
const keptChunks = 3200
const kinds = ['rise', 'fall'] as const
/** Energy below the loudest moment around by this much is taken for silence. */
const floorRatio = 1e-5

export const createOnsetFinder = (source: SampleSource): OnsetFinder => {
  const { sampleRate, channels } = source
  const size = 2 ** Math.round(Math.log2(sampleRate * 0.022))
  const hop = size >> 2
  const fft = realFft(size)
  const window = new Float64Array(size).map((_, i) => 0.5 - 0.5 * Math.cos((2 * Math.PI * (i + 0.5)) / size))
  const raw = Array.from({ length: channels }, () => new Float32Array(size + hop * (chunkFrames - 1)))
  const input = new Float64Array(size)
  const re = new Float64Array(size / 2 + 1)
  const im = new Float64Array(size / 2 + 1)
  const edges = edgesHz.map((hz) => Math.min(size / 2, Math.round((hz * size) / sampleRate)))
  const span = Math.max(4, Math.round((meanSec * sampleRate) / hop))
  const mean = new Float64Array(span).map((_, i) => Math.sin((Math.PI * (i + 0.5)) / span) ** 2)
  const meanSum = mean.reduce((sum, one) => sum + one, 0)
  const around = Math.round((0.25 * sampleRate) / hop)
  const apart = Math.max(2, Math.round((apartSec * sampleRate) / hop))

  const energies = new Map<number, Float64Array>()
  const rises = new Map<number, { rise: number; fall: number }>()
  const refined = new Map<string, Onset[]>()

  /** Band energies of a chunk of frames; frame j is centred on sample j * hop. */
  const chunk = (index: number): Float64Array | null => {
    const known = energies.get(index)
    if (known) return known
    if (!source.read(index * chunkFrames * hop - size / 2, raw)) return null
    const made = new Float64Array(chunkFrames * (bandCount + 1))
    for (let j = 0; j < chunkFrames; j++) {
      for (const data of raw) {
        for (let i = 0; i < size; i++) input[i] = data[j * hop + i]! * window[i]!
        fft.forward(input, re, im)
        for (let b = 0; b < bandCount; b++) {
          let sum = 0
          for (let k = edges[b]!; k < edges[b + 1]!; k++) sum += re[k]! * re[k]! + im[k]! * im[k]!
          made[j * (bandCount + 1) + b] = made[j * (bandCount + 1) + b]! + sum
        }
      }
      let total = 0
      for (let b = 0; b < bandCount; b++) total += made[j * (bandCount + 1) + b]!
      made[j * (bandCount + 1) + bandCount] = total
    }
    energies.set(index, made)
    return made
  }

  /** A few minutes are enough: what is sought again is reckoned again. */
  const forgetSome = () => {
    if (energies.size < keptChunks) return
    energies.clear()
    rises.clear()
    refined.clear()
  }

  const before = new Float64Array(bandCount)
  const after = new Float64Array(bandCount)
  /** Adds the band energies of a frame, whose chunk has been reckoned. */
  const addRow = (sums: Float64Array, j: number, weight: number) => {
    const index = Math.floor(j / chunkFrames)
    const rows = energies.get(index)!
    const at = (j - index * chunkFrames) * (bandCount + 1)
    for (let b = 0; b < bandCount; b++) sums[b] = sums[b]! + rows[at + b]! * weight
  }

  const changeAt = (j: number): { rise: number; fall: number } | null => {
    const known = rises.get(j)
    if (known !== undefined) return known
    let loudest = 0
    for (let i = j - around; i <= j + around; i++) {
      const index = Math.floor(i / chunkFrames)
      const rows = chunk(index)
      if (!rows) return null
      loudest = Math.max(loudest, rows[(i - index * chunkFrames) * (bandCount + 1) + bandCount]!)
    }
    before.fill(0)
    after.fill(0)
    for (let i = 0; i < span; i++) {
      addRow(before, j - 1 - i, mean[i]!)
      addRow(after, j + 1 + i, mean[i]!)
    }
    let up = 0
    let down = 0
    for (let b = 0; b < bandCount; b++) {
      const floor = loudest * floorRatio + 1e-9
      const rise = Math.log2((after[b]! / meanSum + floor) / (before[b]! / meanSum + floor))
      if (rise > 0.5) up += weights[b]! * (Math.min(riseCap, rise) + rise * 1e-3)
      if (rise < -0.5) down += weights[b]! * (Math.min(riseCap, -rise) - rise * 1e-3)
    }
    const change = { rise: up, fall: down }
    rises.set(j, change)
    return change
  }

  // The place: a fine envelope of the sharpened signal around the coarse peak.
  const grain = Math.max(8, Math.round(sampleRate * 0.0005))
  const leadGrains = 320
  const tailGrains = 130
  const fine = new Float64Array(leadGrains + tailGrains)
  const fineRaw = Array.from({ length: channels }, () => new Float32Array((leadGrains + tailGrains) * grain + 1))

  /** A sound that has broken off shortly before an attack, in the fine envelope: too near for the means to show it. */
  const endBefore = (attack: number, start: number, strength: number): Onset[] => {
    let quiet = 0
    for (let g = attack - 48; g < attack; g++) quiet = Math.max(quiet, fine[g]!)
    let loud = 0
    for (let g = Math.max(0, attack - 260); g < attack - 110; g++) loud = Math.max(loud, fine[g]!)
    if (loud < 10 * quiet || loud <= 0) return []
    let last = attack - 49
    while (last > 0 && fine[last]! < 1.5 * quiet + 0.002 * loud) last--
    let middle = last
    while (middle > 0 && fine[middle]! < 0.3 * loud) middle--
    if (last < attack - 200 || middle <= 0) return []
    return [{ cut: start + (last + 2) * grain, anchor: start + middle * grain, strength, isEnd: true }]
  }

  /** Of an end the same is done on the sound turned round. */
  const refine = (j: number, strength: number, isEnd: boolean): Onset[] | null => {
    const key = `${j}${isEnd ? 'e' : ''}`
    const known = refined.get(key)
    if (known) return known
    const start = j * hop - (isEnd ? fine.length - leadGrains : leadGrains) * grain
    if (!source.read(start - 1, fineRaw)) return null
    fine.fill(0)
    for (const data of fineRaw) {
      for (let g = 0; g < fine.length; g++) {
        let sum = 0
        for (let i = 0; i < grain; i++) {
          const at = g * grain + i + 1
          const sharp = data[at]! - 0.9 * data[at - 1]!
          sum += sharp * sharp
        }
        fine[g] = fine[g]! + sum
      }
    }
    if (isEnd) fine.reverse()
    // Two grains together, so that one zero crossing is no silence.
    for (let g = fine.length - 1; g > 0; g--) fine[g] = Math.max(fine[g]!, fine[g - 1]!)
    // The rise is where the next moments stand highest over the loudest of the period before. The coarse place is early when
    // a short sound follows silence, since the mean after it is largest when the sound lies in its middle.
    let first = leadGrains
    let calm = 0
    let peak = 0
    let best = -Infinity
    let loudest = 0
    for (let g = leadGrains - 120; g < fine.length; g++) loudest = Math.max(loudest, fine[g]!)
    for (let g = leadGrains - 60; g < leadGrains + 100; g++) {
      let before = 0
      for (let i = g - 60; i < g - 2; i++) before = Math.max(before, fine[i]!)
      let after = 0
      for (let i = g; i < g + 24; i++) after = Math.max(after, fine[i]!)
      const score =
        Math.log((after + loudest * 1e-4) / (before + loudest * 1e-4)) + 0.3 * Math.log(after / loudest + 1e-4)
      if (score > best + 1e-9) {
        best = score
        first = g
        calm = before
        peak = after
      }
    }
    calm = Math.min(calm, peak * 0.7)
    const low = calm + 0.06 * (peak - calm)
    const end = first + 24
    while (first < end && fine[first]! < low) first++
    let middle = first
    while (middle < end && fine[middle]! < calm + 0.35 * (peak - calm)) middle++
    const at = (g: number) => start + (isEnd ? fine.length - g : g) * grain
    // A slow attack is put where it begins: that is where the ear, and any measure of it, notices something new.
    const onset = { cut: at(first - 2), anchor: at(isEnd ? middle : Math.min(middle, first + 3)), strength, isEnd }
    const both = isEnd ? [onset] : [...endBefore(first - 2, start, strength), onset]
    refined.set(key, both)
    return both
  }

  return {
    reach: (span + around + chunkFrames) * hop + size,
    prepare: (from, to) => {
      const margin = (around + span) * hop + leadGrains * grain
      const last = Math.floor((to + margin) / hop / chunkFrames)
      for (let index = Math.floor((from - margin) / hop / chunkFrames); index <= last; index++) {
        if (!energies.has(index) && chunk(index)) return false
      }
      return true
    },
    between: (from, to) => {
      forgetSome()
      const found: Onset[] = []
      // The cut may lie beside the coarse peak by as much as the fine envelope looks.
      const margin = Math.ceil((leadGrains * grain) / hop)
      const firstFrame = Math.floor(from / hop) - margin
      const lastFrame = Math.ceil(to / hop) + margin
      for (let j = firstFrame; j <= lastFrame; j++) {
        const here = changeAt(j)
        if (here === null) return null
        for (const kind of kinds) {
          const isEnd = kind === 'fall'
          if (here[kind] < (isEnd ? endThreshold : threshold)) continue
          let isPeak = true
          for (let i = 1; i <= apart && isPeak; i++) {
            const earlier = changeAt(j - i)
            const later = changeAt(j + i)
            if (earlier === null || later === null) return null
            isPeak = here[kind] > earlier[kind] && here[kind] >= later[kind]
          }
          if (!isPeak) continue
          const onset = refine(j, here[kind], isEnd)
          if (!onset) return null
          found.push(...onset)
        }
      }
      found.sort((a, b) => a.cut - b.cut)
      const near = endApartSec * sampleRate
      const least = grain * 40
      const kept = found.filter((one, at) =>
        one.isEnd
          ? !found.some((other, place) => {
              const apart = other.cut - one.cut
              return (
                other !== one && (other.isEnd ? place < at && -apart < near : apart < 0 ? -apart < near : apart < least)
              )
            })
          : !found.slice(0, at).some((other) => !other.isEnd && one.cut - other.cut <= grain * 16)
      )
      return kept.filter((one) => one.cut >= from && one.cut < to)
    }
  }
}
