// Measures of attacks: place, rise, what comes before, and how often one is heard.
import { decibels, energySums, envelope, highPass, powerDecibels } from './dsp.ts'
import type { Attack } from './material.ts'
import { percentile } from '../statistics.ts'
import { median } from '@shared/timing/statistics'

export interface AttackOptions {
  /** Box of the fine envelope, seconds. */
  fineSec: number
  /** Where the noise of the pluck or click is apart from the tone, hertz. */
  noiseHz: number
}

export interface NoteMeasure {
  /** Where the envelope over a period is first half up, seconds from the true place. */
  place: number
  /** The same in the band of the noise. */
  noisePlace: number
  /** Of the fine envelope from the last time under 10 % to the first time over 90 %, seconds. */
  rise: number
  /** Mean square from 60 to 5 ms (of the output) before, and of the first 50 ms. */
  before: number
  loud: number
  /** Tops after the first until the next note that stand 4 dB above what is between: of the level over three quarters of a period. */
  rises: number
  /** The same of the noise's level, 6 dB. */
  noiseRises: number
}

interface Climb {
  at10: number
  at50: number
  at90: number
}

/** The way up to the highest level around `at`, in shares of its height above what sounded before. Frames, with fractions. */
const climbOf = (level: Float64Array, from: number, at: number, to: number): Climb => {
  const first = Math.max(0, Math.round(from))
  const end = Math.min(level.length, Math.round(to))
  // What still sounds of the note before; it swings, so the first half of the time before is averaged.
  const quiet = level.subarray(first, Math.max(first + 1, Math.round(first + (at - first) / 2)))
  const floor = quiet.reduce((sum, value) => sum + value, 0) / Math.max(1, quiet.length)
  let top = floor
  for (let i = first; i < end; i += 1) top = Math.max(top, level[i] as number)
  const between = (i: number, wanted: number): number => {
    const [a, b] = [level[i - 1] ?? 0, level[i] ?? 0]
    return b > a ? i - 1 + Math.max(0, Math.min(1, (wanted - a) / (b - a))) : i
  }
  const forward = (share: number): number => {
    const wanted = floor + share * (top - floor)
    for (let i = first + 1; i < end; i += 1) if ((level[i] as number) >= wanted) return between(i, wanted)
    return end
  }
  const at50 = forward(0.5)
  const low = floor + 0.1 * (top - floor)
  let at10 = Math.floor(at50)
  while (at10 > first && (level[at10] as number) >= low) at10 -= 1
  return { at10: between(at10 + 1, low), at50, at90: forward(0.9) }
}

interface Rise {
  frame: number
  /** Of its top. */
  level: number
}

/** Tops that stand at least `by` decibels above the lowest point since the top before; levels in decibels. */
const risesIn = (level: Float64Array, from: number, to: number, by: number): Rise[] => {
  const found: Rise[] = []
  let [low, high, highAt, isUp] = [Infinity, -Infinity, 0, false]
  const end = Math.min(level.length, Math.round(to))
  for (let i = Math.max(0, Math.round(from)); i < end; i += 1) {
    const now = level[i] as number
    if (isUp) {
      if (now > high) [high, highAt] = [now, i]
      else if (now < high - by) {
        found.push({ frame: highAt, level: high })
        ;[isUp, low] = [false, now]
      }
    } else {
      low = Math.min(low, now)
      if (now > low + by) [isUp, high, highAt] = [true, now, i]
    }
  }
  if (isUp) found.push({ frame: highAt, level: high })
  return found
}

/** Further rises after the loudest, and those before it, that come within `near` decibels of it. */
const furtherRises = (level: Float64Array, from: number, to: number, by: number, near: number): number => {
  const rises = risesIn(level, from, to, by)
  const top = rises.reduce((most, rise) => Math.max(most, rise.level), -Infinity)
  return Math.max(0, rises.filter((rise) => rise.level > top - near).length - 1)
}

/**
 * `attacks` in the time and pitch of `x`. `stretch`: how much longer it is than the source; `lookBack`: how long the time before an
 * attack is that is looked at, to that of the output (1 for the output, the speed for the source).
 */
export const measureNotes = (
  x: ArrayLike<number>,
  rate: number,
  attacks: readonly Attack[],
  stretch: number,
  lookBack: number,
  options: AttackOptions
): NoteMeasure[] => {
  const fine = envelope(x, options.fineSec * rate)
  const noiseBand = highPass(x, options.noiseHz, rate)
  const noise = envelope(noiseBand, 0.0015 * rate)
  const noiseLevel = envelope(noiseBand, 0.003 * rate).map(decibels)
  const sums = energySums(x)
  const kept = new Map<number, Float64Array>()
  const envelopeOver = (seconds: number): Float64Array => {
    const width = Math.round(seconds * rate)
    const made = kept.get(width) ?? envelope(x, width)
    kept.set(width, made)
    return made
  }
  const keptLevels = new Map<Float64Array, Float64Array>()
  const levelOver = (seconds: number): Float64Array => {
    const linear = envelopeOver(seconds)
    const made = keptLevels.get(linear) ?? linear.map(decibels)
    keptLevels.set(linear, made)
    return made
  }
  return attacks.map((attack, i) => {
    const at = attack.sec * rate
    const gap = ((attacks[i + 1]?.sec ?? attack.sec + 0.4 * stretch) - attack.sec) * rate
    const gapBefore = i > 0 ? (attack.sec - (attacks[i - 1] as Attack).sec) * rate : Infinity
    const from = at - Math.min(0.06 * rate, gapBefore * 0.4)
    const to = at + Math.min(0.12 * rate, gap * 0.6)
    const climb = climbOf(fine, from, at, to)
    const placeClimb = climbOf(envelopeOver(Math.max(options.fineSec, 1 / attack.hertz)), from, at, to)
    const noiseClimb = climbOf(noise, Math.max(from, at - 0.04 * rate), at, at + 0.04 * rate)
    const [begin, end] = [at - Math.min(0.05 * rate, gapBefore * 0.3), at + gap - Math.min(0.06 * rate, gap * 0.35)]
    const [far, close] = [0.06 * rate * lookBack, 0.005 * rate * lookBack]
    const early = sums(at - far, at - close) / (far - close)
    const loud = sums(at, at + 0.05 * rate) / (0.05 * rate)
    return {
      place: placeClimb.at50 / rate - attack.sec,
      noisePlace: noiseClimb.at50 / rate - attack.sec,
      rise: (climb.at90 - climb.at10) / rate,
      before: early,
      loud,
      rises: furtherRises(levelOver(0.75 * Math.max(0.006, 1 / attack.hertz)), begin, end, 4, 12),
      noiseRises: furtherRises(noiseLevel, begin, Math.min(end, at + 0.12 * rate * stretch), 6, 8)
    }
  })
}

export interface AttackFigures {
  /** The common one, milliseconds; positive is late. Against the source's own way from the true place to half up. */
  offset: number
  /** Of the noise, against the true place itself. */
  noiseOffset: number
  /** What 95 % of the places do not exceed once the common offset is taken off, milliseconds. */
  place95: number
  placeWorst: number
  rise: number
  riseSourceMs: number
  /** Further attacks that the source has not got. */
  doubled: number
  preEcho: number
}

const middleOf = (values: readonly number[]): number => median(values) ?? NaN

/** By the level or by the noise, whichever tells more. */
const furtherThan = (output: NoteMeasure, source: NoteMeasure | undefined): number =>
  Math.max(0, output.rises - (source?.rises ?? 0), output.noiseRises - (source?.noiseRises ?? 0))

export const compareAttacks = (source: readonly NoteMeasure[], output: readonly NoteMeasure[]): AttackFigures => {
  const late = output.map((note, i) => (note.place - (source[i]?.place ?? 0)) * 1000)
  const offset = middleOf(late)
  const off = late.map((value) => Math.abs(value - offset))
  const riseOf = (notes: readonly NoteMeasure[]): number => middleOf(notes.map((note) => note.rise))
  const excess = output.map(
    (note, i) => Math.max(0, note.before - (source[i]?.before ?? 0)) / Math.max(1e-12, source[i]?.loud ?? 0)
  )
  return {
    offset,
    noiseOffset: middleOf(output.map((note) => note.noisePlace * 1000)),
    place95: percentile(off, 0.95),
    placeWorst: Math.max(...off),
    rise: riseOf(output) / riseOf(source),
    riseSourceMs: riseOf(source) * 1000,
    doubled: output.reduce((sum, note, i) => sum + furtherThan(note, source[i]), 0),
    preEcho: powerDecibels(Math.max(1e-8, excess.reduce((a, b) => a + b, 0) / Math.max(1, excess.length)))
  }
}
