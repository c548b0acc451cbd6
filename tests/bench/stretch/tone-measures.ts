// Measures of steady tones: pitch, ripple of the level, single partials, energy that is on no partial.
import { blackmanHarris, decibels, energySums, framePower, phasorAt, powerDecibels } from './dsp.ts'

export interface Span {
  from: number
  to: number
}

/** Strongest spectral peak within a semitone and a half of what is expected; good to about a cent. */
const roughPitch = (x: ArrayLike<number>, rate: number, expected: number, { from, to }: Span): number => {
  const size = 2 ** Math.min(17, Math.ceil(Math.log2(to - from)))
  const window = blackmanHarris(Math.min(size, to - from))
  const power = framePower(x, from, window, size)
  const [low, high] = [(expected / 1.09) * (size / rate), expected * 1.09 * (size / rate)]
  let best = Math.max(1, Math.ceil(low))
  for (let i = best; i <= high; i += 1) if ((power[i] as number) > (power[best] as number)) best = i
  const [a, b, c] = [best - 1, best, best + 1].map((i) => Math.log((power[i] as number) + 1e-30)) as [
    number,
    number,
    number
  ]
  const bend = a - 2 * b + c
  return ((best + (bend < 0 ? (0.5 * (a - c)) / bend : 0)) * rate) / size
}

interface Track {
  hertz: number
  /** Mean amplitude. */
  level: number
}

/** Frequency by the slope of the phase over overlapping frames, and the mean amplitude, near a frequency known roughly. */
const trackPartial = (
  x: ArrayLike<number>,
  rate: number,
  near: number,
  frameSec: number,
  { from, to }: Span
): Track => {
  const length = Math.min(to - from, Math.round(frameSec * rate))
  const hop = Math.max(1, Math.floor(length / 4))
  let [last, turns] = [0, 0]
  let [n, sumT, sumP, sumTT, sumTP, sumA] = [0, 0, 0, 0, 0, 0]
  for (let at = from; at + length <= to; at += hop) {
    const { re, im } = phasorAt(x, at, length, near / rate)
    const phase = Math.atan2(im, re)
    if (n > 0) turns += Math.round((last - phase) / (2 * Math.PI) - turns)
    const whole = phase + 2 * Math.PI * turns
    last = whole
    const t = (at - from) / rate
    n += 1
    sumT += t
    sumP += whole
    sumTT += t * t
    sumTP += t * whole
    sumA += (2 * Math.hypot(re, im)) / 2
  }
  const slope = n > 1 ? (n * sumTP - sumT * sumP) / (n * sumTT - sumT * sumT) : 0
  return { hertz: near + slope / (2 * Math.PI), level: sumA / Math.max(1, n) }
}

/** Hertz of one sinusoid near `expected` within the span, and its level; frames of at least `leastSec` keep neighbours apart. */
export const pitchNear = (
  x: ArrayLike<number>,
  rate: number,
  expected: number,
  span: Span,
  leastSec: number
): Track => {
  const frameSec = Math.max(leastSec, 8 / expected)
  const rough = roughPitch(x, rate, expected, span)
  const first = trackPartial(x, rate, rough, frameSec, span)
  return trackPartial(x, rate, first.hertz, frameSec, span)
}

export const centsBetween = (hertz: number, expected: number): number => 1200 * Math.log2(hertz / expected)

export interface ToneMeasure {
  cents: number
  /** Half of the way between the highest and the lowest level, decibels. */
  ripple: number
  partials: number[]
  /** Energy further than 4.5 bins of a 0.7 s frame from every partial, to the whole, decibels. */
  offPartials: number
}

/** `expected` hertz; the span must be free of the tone's beginning and end. */
export const measureTone = (
  x: ArrayLike<number>,
  rate: number,
  expected: number,
  count: number,
  span: Span
): ToneMeasure => {
  const present = Array.from({ length: count }, (_, i) => i + 1).filter((k) => k * expected < rate * 0.45)
  const frameSec = Math.max(0.12, 8 / expected)
  let hertz = pitchNear(x, rate, expected, span, frameSec).hertz
  let tracks: Track[] = []
  for (let round = 0; round < 2; round += 1) {
    tracks = present.map((k) => trackPartial(x, rate, k * hertz, frameSec, span))
    // Each partial tells the fundamental k times as finely; weighted by its power.
    const weights = tracks.map((track, i) => (present[i] as number) ** 2 * track.level ** 2)
    const whole = weights.reduce((a, b) => a + b, 0)
    const mean = tracks.reduce(
      (sum, track, i) => sum + (track.hertz / (present[i] as number)) * (weights[i] as number),
      0
    )
    if (whole > 0) hertz = mean / whole
  }
  return {
    cents: centsBetween(hertz, expected),
    ripple: rippleOf(x, rate, hertz, span),
    partials: tracks.map((track) => decibels(track.level)),
    offPartials: energyOff(x, rate, hertz, present.length, span)
  }
}

/** Level over whole periods (at least 40 ms), every quarter of that. */
const rippleOf = (x: ArrayLike<number>, rate: number, hertz: number, { from, to }: Span): number => {
  const sums = energySums(x)
  const width = (Math.ceil(0.04 * hertz) * rate) / hertz
  let [low, high] = [Infinity, -Infinity]
  for (let at = from; at + width <= to; at += width / 4) {
    const level = powerDecibels(sums(at, at + width) / width)
    low = Math.min(low, level)
    high = Math.max(high, level)
  }
  return (high - low) / 2
}

const energyOff = (x: ArrayLike<number>, rate: number, hertz: number, count: number, { from, to }: Span): number => {
  const size = 2 ** 15
  const window = blackmanHarris(Math.min(size, to - from))
  const lobe = 4.5 * (size / window.length)
  let [off, whole] = [0, 0]
  for (let at = from; at === from || at + window.length <= to; at += window.length >> 1) {
    framePower(x, at, window, size).forEach((power, bin) => {
      const k = Math.max(1, Math.min(count, Math.round((bin * rate) / size / hertz)))
      whole += power
      if (Math.abs(bin - (k * hertz * size) / rate) > lobe) off += power
    })
  }
  return powerDecibels(off / whole)
}
