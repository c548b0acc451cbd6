// How long sound takes from the program's own clock through loudspeaker or headphone, air, microphone and back.
import { realFft } from './stretch/fft.ts'

/** Where the test signal was found in a recording. */
export interface FoundSignal {
  /** Frame of the recording (with its fraction) at which the signal's first sample lies. */
  startFrame: number
  /** Mean likeness of the chirps, 0-1; noise alone gives about 0.15. */
  confidence: number
  /** Farthest that one of the chirps lies from where the others say, in seconds. */
  spreadSec: number
}

/** Loud enough over a room, moderate at the ear. */
const PEAK = 0.35
const CHIRP_SEC = 0.04
/** Where the loudspeakers of phones and laptops, headphones and built-in microphones all do their work. */
const LOW_HZ = 1000
const HIGH_HZ = 6000
/** No two gaps are alike, nor any sum of them: only one place fits all chirps. */
const CHIRPS_AT_SEC = [0, 0.23, 0.53, 0.88, 1.32]
/** Silence before the first chirp, so that a device that wakes up slowly loses none of it; and after the last one. */
const LEAD_SEC = 0.5
const TAIL_SEC = 0.3
/** Under it, what was found may be chance. */
const LEAST_CONFIDENCE = 0.3
/** Chirps that lie together within this are one signal. */
const AGREE_SEC = 0.001
const LEAST_AGREEING = 3
/** The direct sound comes before its reflections, and is seldom much weaker. */
const DIRECT_SHARE = 0.75
const REFLECTION_SEC = 0.015

/** Length of the test signal in seconds. */
export const roundTripSec = LEAD_SEC + (CHIRPS_AT_SEC.at(-1) as number) + CHIRP_SEC + TAIL_SEC

/** The test signal: short rising tones of 1 to 6 kHz, irregularly spaced, between silences. Mono, peak 0.35. */
export const roundTripSignal = (sampleRate: number): Float32Array => {
  const signal = new Float32Array(Math.round(roundTripSec * sampleRate))
  const chirp = chirpAt(sampleRate)
  for (const sec of CHIRPS_AT_SEC) {
    const start = Math.round((LEAD_SEC + sec) * sampleRate)
    chirp.forEach((value, n) => (signal[start + n] = PEAK * value))
  }
  return signal
}

/**
 * Finds the test signal in a recording, whatever its gain or polarity, in noise and with reflections. Every chirp is laid over
 * the recording by cross-correlation, normalised by the energy that the recording has there in the chirp's band (Cauchy and
 * Schwarz: 1 is the chirp and nothing else); of the result the envelope is taken (Hilbert), so that a loudspeaker that turns
 * the phase shifts nothing. All chirps together say where, each for itself says how exactly: the median.
 * Null where it is not there, or not for sure.
 */
export const findRoundTrip = (recording: Float32Array, sampleRate: number): FoundSignal | null => {
  if (!(sampleRate >= 4 * LOW_HZ) || recording.length < CHIRP_SEC * sampleRate) return null
  const likeness = likenessOf(recording, sampleRate)
  if (!likeness) return null
  const offsets = CHIRPS_AT_SEC.map((sec) => Math.round((LEAD_SEC + sec) * sampleRate))
  // The recording may have begun within the leading silence.
  const first = -(offsets[0] as number)
  const last = likeness.length - (offsets.at(-1) as number)
  const scoreAt = (start: number): number =>
    offsets.reduce((sum, offset) => sum + (likeness[start + offset] ?? 0), 0) / offsets.length
  const scores = Float64Array.from({ length: Math.max(0, last - first) }, (_, i) => scoreAt(first + i))
  const best = directPeak(scores, Math.round(REFLECTION_SEC * sampleRate))
  if (best === null || (scores[best] as number) < LEAST_CONFIDENCE) return null

  const near = Math.round(AGREE_SEC * sampleRate)
  const places = offsets
    .map((offset) => peakNear(likeness, first + best + offset, near) - offset)
    .filter((place) => Number.isFinite(place))
    .sort((a, b) => a - b)
  const startFrame = places[places.length >> 1] as number
  const agreeing = places.filter((place) => Math.abs(place - startFrame) <= near / 2)
  if (agreeing.length < LEAST_AGREEING) return null
  const spreadSec = Math.max(...agreeing.map((place) => Math.abs(place - startFrame))) / sampleRate
  return { startFrame, confidence: Math.min(1, scores[best] as number), spreadSec }
}

/** One chirp at full scale under a Hann window. */
const chirpAt = (sampleRate: number): Float64Array => {
  const frames = Math.round(CHIRP_SEC * sampleRate)
  const high = Math.min(HIGH_HZ, sampleRate * 0.4)
  return Float64Array.from({ length: frames }, (_, n) => {
    const sec = n / sampleRate
    const turns = LOW_HZ * sec + ((high - LOW_HZ) * sec * sec) / (2 * CHIRP_SEC)
    return Math.sin(2 * Math.PI * turns) * Math.sin((Math.PI * n) / frames) ** 2
  })
}

/** For every frame, how much the recording from there on is like one chirp: 0 to about 1. Null for silence. */
const likenessOf = (recording: Float32Array, sampleRate: number): Float64Array | null => {
  const chirp = chirpAt(sampleRate)
  const size = 2 ** Math.ceil(Math.log2(recording.length + chirp.length))
  const fft = realFft(size)
  const spectrumOf = (samples: ArrayLike<number>) => {
    const padded = new Float64Array(size)
    for (let n = 0; n < samples.length; n += 1) padded[n] = Number.isFinite(samples[n]) ? (samples[n] as number) : 0
    const [re, im] = [new Float64Array(size / 2 + 1), new Float64Array(size / 2 + 1)]
    fft.forward(padded, re, im)
    return { re, im }
  }
  const back = (re: Float64Array, im: Float64Array): Float64Array => {
    const out = new Float64Array(size)
    fft.inverse(re, im, out)
    return out
  }

  const sound = spectrumOf(recording)
  const wanted = spectrumOf(chirp)
  const hzPerBin = sampleRate / size
  for (let bin = 0; bin < sound.re.length; bin += 1) {
    const hz = bin * hzPerBin
    if (hz >= LOW_HZ * 0.7 && hz <= HIGH_HZ * 1.2) continue
    sound.re[bin] = 0
    sound.im[bin] = 0
  }
  const energies = energyIn(back(sound.re, sound.im), recording.length, chirp.length)
  const loudest = energies.reduce((most, energy) => Math.max(most, energy), 0)
  if (!(loudest > 1e-12)) return null

  const [re, im] = [new Float64Array(sound.re.length), new Float64Array(sound.re.length)]
  for (let bin = 0; bin < re.length; bin += 1) {
    const [sr, si] = [sound.re[bin] as number, sound.im[bin] as number]
    const [wr, wi] = [wanted.re[bin] as number, wanted.im[bin] as number]
    re[bin] = sr * wr + si * wi
    im[bin] = si * wr - sr * wi
  }
  const straight = back(re, im)
  const turned = back(
    im,
    re.map((value) => -value)
  )
  const own = chirp.reduce((sum, value) => sum + value * value, 0)
  // What is far weaker than the rest of the recording is its rounding, not a signal.
  const floor = loudest * 1e-7
  return Float64Array.from(
    { length: recording.length },
    (_, n) =>
      Math.hypot(straight[n] as number, turned[n] as number) / Math.sqrt(own * Math.max(floor, energies[n] as number))
  )
}

/** Energy of the next `window` frames, for every frame. */
const energyIn = (samples: Float64Array, length: number, window: number): Float64Array => {
  const sums = new Float64Array(length + window + 1)
  for (let n = 0; n < length + window; n += 1) sums[n + 1] = (sums[n] as number) + (samples[n] ?? 0) ** 2
  return Float64Array.from({ length }, (_, n) => (sums[n + window] as number) - (sums[n] as number))
}

/** The highest place, or the first peak shortly before it that is nearly as high. */
const directPeak = (scores: Float64Array, reflectionFrames: number): number | null => {
  let best = -1
  scores.forEach((score, n) => {
    if (best < 0 || score > (scores[best] as number)) best = n
  })
  if (best < 0) return null
  const enough = (scores[best] as number) * DIRECT_SHARE
  for (let n = Math.max(1, best - reflectionFrames); n < best; n += 1) {
    const here = scores[n] as number
    if (here >= enough && here >= (scores[n - 1] as number) && here > (scores[n + 1] as number)) return n
  }
  return best
}

/** Place of the highest value within `reach`, between frames by a parabola through its neighbours; NaN where there is none. */
const peakNear = (values: Float64Array, centre: number, reach: number): number => {
  let best = -1
  for (let n = Math.max(0, centre - reach); n <= centre + reach; n += 1)
    if (best < 0 || (values[n] ?? 0) > (values[best] as number)) best = n
  const here = values[best] ?? 0
  if (here < LEAST_CONFIDENCE) return NaN
  const [before, after] = [values[best - 1] ?? here, values[best + 1] ?? here]
  const bend = before - 2 * here + after
  return bend < 0 ? best + (before - after) / (2 * bend) : best
}
