// The signal arithmetic that the measures share. Levels are amplitudes unless a name says decibels.

const twiddles = new Map<number, { cos: Float64Array; sin: Float64Array }>()

const twiddlesOf = (n: number): { cos: Float64Array; sin: Float64Array } => {
  const kept = twiddles.get(n)
  if (kept) return kept
  const angle = (_: unknown, i: number): number => (-2 * Math.PI * i) / n
  const angles = Float64Array.from({ length: n / 2 }, angle)
  const made = { cos: angles.map(Math.cos), sin: angles.map(Math.sin) }
  twiddles.set(n, made)
  return made
}

/** In place, length a power of two. */
export const fft = (re: Float64Array, im: Float64Array): void => {
  const n = re.length
  const { cos, sin } = twiddlesOf(n)
  for (let i = 1, j = 0; i < n; i += 1) {
    let bit = n >> 1
    for (; j & bit; bit >>= 1) j ^= bit
    j ^= bit
    if (i < j) {
      const a = re[i] as number
      re[i] = re[j] as number
      re[j] = a
      const b = im[i] as number
      im[i] = im[j] as number
      im[j] = b
    }
  }
  for (let size = 2; size <= n; size <<= 1) {
    const half = size >> 1
    const step = n / size
    for (let start = 0; start < n; start += size)
      for (let k = 0, t = 0; k < half; k += 1, t += step) {
        const a = start + k
        const b = a + half
        const c = cos[t] as number
        const s = sin[t] as number
        const x = re[b] as number
        const y = im[b] as number
        const tr = x * c - y * s
        const ti = x * s + y * c
        re[b] = (re[a] as number) - tr
        im[b] = (im[a] as number) - ti
        re[a] = (re[a] as number) + tr
        im[a] = (im[a] as number) + ti
      }
  }
}

export const hann = (n: number): Float64Array =>
  Float64Array.from({ length: n }, (_, i) => 0.5 - 0.5 * Math.cos((2 * Math.PI * i) / n))

/** Four terms, side lobes below -92 dB. */
export const blackmanHarris = (n: number): Float64Array =>
  Float64Array.from({ length: n }, (_, i) => {
    const a = (2 * Math.PI * i) / n
    return 0.35875 - 0.48829 * Math.cos(a) + 0.14128 * Math.cos(2 * a) - 0.01168 * Math.cos(3 * a)
  })

/** Power of the bins 0..n/2 of one windowed frame; silence outside the signal. */
export const framePower = (x: ArrayLike<number>, from: number, window: Float64Array, size = window.length) => {
  const re = new Float64Array(size)
  const im = new Float64Array(size)
  for (let i = 0; i < window.length; i += 1) re[i] = (x[from + i] ?? 0) * (window[i] as number)
  fft(re, im)
  const power = new Float64Array(size / 2 + 1)
  for (let i = 0; i < power.length; i += 1) power[i] = (re[i] as number) ** 2 + (im[i] as number) ** 2
  return power
}

export const decibels = (amplitude: number): number => 20 * Math.log10(Math.max(amplitude, 1e-10))
export const powerDecibels = (power: number): number => 10 * Math.log10(Math.max(power, 1e-20))

/** Sum over x[from..to), both may be fractions. */
export type RangeSum = (from: number, to: number) => number

/** Energy of any stretch of the signal in constant time. */
export const energySums = (x: ArrayLike<number>): RangeSum => {
  const sums = new Float64Array(x.length + 1)
  for (let i = 0; i < x.length; i += 1) sums[i + 1] = (sums[i] as number) + (x[i] as number) ** 2
  const upTo = (at: number): number => {
    if (at <= 0) return 0
    if (at >= x.length) return sums[x.length] as number
    const whole = Math.floor(at)
    const base = sums[whole] as number
    return base + (at - whole) * ((sums[whole + 1] as number) - base)
  }
  return (from, to) => upTo(to) - upTo(from)
}

/** Moving average over an odd number of frames, centred. */
const smooth = (x: Float64Array, width: number): Float64Array => {
  const half = Math.max(0, Math.round((width - 1) / 2))
  const out = new Float64Array(x.length)
  const n = x.length
  let sum = 0
  for (let i = 0; i < Math.min(n, half); i += 1) sum += x[i] as number
  for (let i = 0; i < n; i += 1) {
    if (i + half < n) sum += x[i + half] as number
    if (i - half - 1 >= 0) sum -= x[i - half - 1] as number
    out[i] = Math.max(0, sum / (2 * half + 1))
  }
  return out
}

/** Root of the mean square: a box of `width` frames twice, so a triangle of twice that; a whole period makes it flat. */
export const envelope = (x: ArrayLike<number>, width: number): Float64Array => {
  const out = new Float64Array(x.length)
  for (let i = 0; i < out.length; i += 1) out[i] = (x[i] as number) ** 2
  const smoothed = smooth(smooth(out, width), width)
  for (let i = 0; i < out.length; i += 1) smoothed[i] = Math.sqrt(smoothed[i] as number)
  return smoothed
}

/** Second-order Butterworth run forwards and backwards: no delay, 24 dB an octave. */
export const highPass = (x: ArrayLike<number>, hertz: number, rate: number): Float64Array => {
  const w = (2 * Math.PI * Math.min(hertz, rate * 0.45)) / rate
  const alpha = Math.sin(w) / Math.SQRT2
  const a0 = 1 + alpha
  const [b0, b1] = [(1 + Math.cos(w)) / 2 / a0, -(1 + Math.cos(w)) / a0]
  const [a1, a2] = [(-2 * Math.cos(w)) / a0, (1 - alpha) / a0]
  const pass = (signal: Float64Array): Float64Array => {
    const out = new Float64Array(signal.length)
    let x1 = 0
    let x2 = 0
    let y1 = 0
    let y2 = 0
    for (let i = 0; i < signal.length; i += 1) {
      const now = signal[i] as number
      const y = b0 * now + b1 * x1 + b0 * x2 - a1 * y1 - a2 * y2
      x2 = x1
      x1 = now
      y2 = y1
      y1 = y
      out[i] = y
    }
    return out
  }
  const copy = new Float64Array(x.length)
  copy.set(x)
  return pass(pass(copy).toReversed()).toReversed()
}

export interface Phasor {
  re: number
  im: number
}

/** Complex amplitude at one frequency of the Hann-windowed frame beginning at `from`, phase counted from frame 0. */
export const phasorAt = (x: ArrayLike<number>, from: number, length: number, cyclesPerFrame: number): Phasor => {
  const step = 2 * Math.PI * cyclesPerFrame
  const turnRe = Math.cos(step)
  const turnIm = -Math.sin(step)
  const lobeRe = Math.cos((2 * Math.PI) / length)
  const lobeIm = Math.sin((2 * Math.PI) / length)
  let cr = Math.cos(step * from)
  let ci = -Math.sin(step * from)
  let wr = 1
  let wi = 0
  let re = 0
  let im = 0
  for (let i = 0; i < length; i += 1) {
    const value = (x[from + i] ?? 0) * (1 - wr)
    re += value * cr
    im += value * ci
    const turned = cr * turnRe - ci * turnIm
    ci = cr * turnIm + ci * turnRe
    cr = turned
    const moved = wr * lobeRe - wi * lobeIm
    wi = wr * lobeIm + wi * lobeRe
    wr = moved
  }
  return { re: (2 * re) / length, im: (2 * im) / length }
}

export const middleChannel = (channels: readonly Float32Array[]): Float32Array => {
  const [first] = channels
  if (!first) return new Float32Array(0)
  if (channels.length === 1) return first
  return first.map((_, i) => channels.reduce((sum, channel) => sum + (channel[i] ?? 0), 0) / channels.length)
}
