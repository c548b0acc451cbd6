// How a recording is tuned against A 440 (ISO 16), found while it streams past. Frequencies of the peaks in Hann frames
// by the two-bin ratio (Grandke 1983, "Interpolation algorithms for discrete Fourier transforms of weighted signals"),
// refined by the phase between frames (Flanagan & Golden 1966, "Phase vocoder"); significance after Rayleigh.
import { realFft } from './stretch/fft.ts'

export interface Tuning {
  /** Above or below equal temperament on A 440: -50 to 50, positive is sharp. */
  cents: number
  /** How far the peaks agree: the resultant length of their deviations, 0 to 1. */
  confidence: number
}

export interface TuningFinder {
  /** One channel, any number of samples at a time. */
  push(mono: Float32Array): void
  /** What was heard so far; null when it has no tuning: noise, silence, drums, or notes that do not agree. */
  result(): Tuning | null
}

const standardHz = 440
const lowestHz = 55
const highestHz = 1000
const frameSize = 2048
const hop = 512
/** Peaks closer to the floor of their neighbourhood than this may be noise; a ratio of magnitudes. */
const overFloor = 8
const floorSpan = 32
/** Peaks fainter than this beside the loudest of the frame do not count (-40 dB). */
const besideLoudest = 0.01
/** What two frames say of one steady partial differs less than this, cents. */
const steadyCents = 6
/** Partials of one series fall on simple ratios, within 6 cents; no interval of equal temperament comes that close to them. */
const besideRatio = 2 ** (6 / 1200) - 1
const leastAgreement = 0.4
/** Of the number of peaks times the square of their agreement (Rayleigh): noise hardly ever gets there. */
const leastEvidence = 20
/** The same of the number of notes: the few modes of a drum kit may agree by chance, three notes and more do not. */
const leastNotes = 3

interface Peak {
  hz: number
  magnitude: number
}

/** Both in one unit; cents from `from` up to `to`. */
const centsBetween = (from: number, to: number): number => 1200 * Math.log2(to / from)

/** Where another partial stands when this one is the 3rd, 5th, 7th, 11th or 13th of a series, or a multiple of those. */
const oddRatios: number[] = [
  1 / 3,
  ...[5, 7, 11, 13].flatMap((order) => [1, 2, 3, 4, 5, 6, 7, 8].filter((n) => n !== order).map((n) => n / order))
]

/** A high partial of a note lies beside equal temperament however well the note is tuned: the 5th 14 cents below it. */
const isOddPartial = (hz: number, peaks: readonly Peak[]): boolean => {
  for (const other of peaks) {
    if (other.hz === hz) continue
    const ratio = other.hz / hz
    for (const odd of oddRatios) if (Math.abs(ratio - odd) < odd * besideRatio) return true
  }
  return false
}

/** Every `factor`th sample of what a windowed sinc leaves; only what lies under 1000 Hz has to stay clean. */
const createDecimator = (factor: number, put: (sample: number) => void) => {
  const reach = 3 * factor
  const taps = Float64Array.from({ length: 2 * reach + 1 }, (_, i) => {
    const x = (i - reach) / factor
    const sinc = x === 0 ? 1 : Math.sin(Math.PI * x) / (Math.PI * x)
    return (sinc * (0.5 + 0.5 * Math.cos((Math.PI * x) / 3.1))) / factor
  })
  const line = new Float64Array(2 * taps.length)
  let at = 0
  let due = factor
  return (mono: Float32Array): void => {
    for (let i = 0; i < mono.length; i++) {
      // Written twice, so that the last samples always lie in one stretch.
      line[at] = line[at + taps.length] = mono[i]!
      at = at + 1 === taps.length ? 0 : at + 1
      if (--due > 0) continue
      due = factor
      let sum = 0
      for (let t = 0; t < taps.length; t++) sum += taps[t]! * line[at + t]!
      put(sum)
    }
  }
}

/** Listens to a recording of `sampleRate` hertz; keeps only a few frames of it. */
export const createTuningFinder = (sampleRate: number): TuningFinder => {
  const factor = Math.max(1, Math.round(sampleRate / 6000))
  const rate = sampleRate / factor
  const binHz = rate / frameSize
  const lowestBin = Math.max(2, Math.floor(lowestHz / binHz))
  const highestBin = Math.min(frameSize / 2 - 2, Math.ceil(highestHz / binHz))
  const window = Float64Array.from({ length: frameSize }, (_, i) => 0.5 - 0.5 * Math.cos((2 * Math.PI * i) / frameSize))
  const fft = realFft(frameSize)
  const recent = new Float64Array(frameSize)
  const frame = new Float64Array(frameSize)
  const magnitudes = new Float64Array(frameSize / 2 + 1)
  let now = { re: new Float64Array(frameSize / 2 + 1), im: new Float64Array(frameSize / 2 + 1) }
  let before = { re: new Float64Array(frameSize / 2 + 1), im: new Float64Array(frameSize / 2 + 1) }
  let filled = 0
  let hasBefore = false
  const sums = { x: 0, y: 0, weight: 0, squares: 0 }
  /** What each semitone has of the weight, the lowest one's first. */
  const ofNotes = new Float64Array(Math.round(12 * Math.log2(highestHz / lowestHz)) + 2)

  /** The middle magnitude of the bins around. */
  const floorAround = (bin: number): number => {
    const around = magnitudes.slice(Math.max(1, bin - floorSpan), bin + floorSpan).sort()
    return around[around.length >> 1]!
  }

  /** Hertz of the peak at this bin from the bins beside it, exact for one tone under a Hann window. */
  const hzIn = ({ re, im }: typeof now, bin: number): number => {
    const [left, here, right] = [bin - 1, bin, bin + 1].map((k) => Math.hypot(re[k]!, im[k]!)) as [
      number,
      number,
      number
    ]
    const ratio = Math.max(left, right) / here
    return (bin + (Math.sign(right - left) * (2 * ratio - 1)) / (ratio + 1)) * binHz
  }

  /** Hertz from how far the phase of the bin has turned since the frame before; `near` tells how many whole turns. */
  const hzByPhase = (bin: number, near: number): number => {
    const phase = Math.atan2(now.im[bin]!, now.re[bin]!) - Math.atan2(before.im[bin]!, before.re[bin]!)
    const turns = phase / (2 * Math.PI)
    const expected = (near * hop) / rate
    return ((turns + Math.round(expected - turns)) * rate) / hop
  }

  const steadyPeaks = (): Peak[] => {
    let loudest = 0
    for (let k = 1; k < highestBin + floorSpan; k++) {
      magnitudes[k] = Math.sqrt(now.re[k]! ** 2 + now.im[k]! ** 2)
      loudest = Math.max(loudest, magnitudes[k]!)
    }
    const peaks: Peak[] = []
    for (let k = lowestBin; k <= highestBin; k++) {
      const here = magnitudes[k]!
      if (here <= magnitudes[k - 1]! || here < magnitudes[k + 1]! || here < loudest * besideLoudest) continue
      if (here < 1e-4 || here < overFloor * floorAround(k)) continue
      const hz = hzIn(now, k)
      const turned = hzByPhase(k, hz)
      const isSteady = [hz, hzIn(before, k)].every((one) => Math.abs(centsBetween(turned, one)) < steadyCents)
      if (isSteady && turned >= lowestHz && turned <= highestHz) peaks.push({ hz: turned, magnitude: here })
    }
    return peaks
  }

  const listen = (): void => {
    for (let i = 0; i < frameSize; i++) frame[i] = recent[i]! * window[i]!
    ;[now, before] = [before, now]
    fft.forward(frame, now.re, now.im)
    if (hasBefore) {
      const peaks = steadyPeaks()
      for (const { hz, magnitude } of peaks) {
        if (isOddPartial(hz, peaks)) continue
        // Strings stretch their high partials: the lower a peak, the more it counts.
        const weight = Math.sqrt(magnitude) / hz
        const angle = (2 * Math.PI * centsBetween(standardHz, hz)) / 100
        ofNotes[Math.round(centsBetween(lowestHz, hz) / 100)]! += weight
        sums.x += weight * Math.cos(angle)
        sums.y += weight * Math.sin(angle)
        sums.weight += weight
        sums.squares += weight * weight
      }
    }
    hasBefore = true
  }

  const decimate = createDecimator(factor, (sample) => {
    recent[filled++] = sample
    if (filled < frameSize) return
    listen()
    recent.copyWithin(0, hop)
    filled = frameSize - hop
  })

  return {
    push: decimate,
    result: () => {
      const { x, y, weight, squares } = sums
      if (weight === 0) return null
      const confidence = Math.hypot(x, y) / weight
      const agreed = (weight * confidence) ** 2
      if (confidence < leastAgreement || agreed / squares < leastEvidence) return null
      if (agreed / ofNotes.reduce((sum, one) => sum + one * one, 0) < leastNotes) return null
      return { cents: (Math.atan2(y, x) / (2 * Math.PI)) * 100, confidence }
    }
  }
}
