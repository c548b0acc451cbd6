// Real Fourier transform of a power-of-two length, by a half-length complex radix-2 transform (Cooley & Tukey 1965; the
// split into even and odd samples as in Sorensen et al. 1987, "Real-valued fast Fourier transform algorithms").

export interface RealFft {
  readonly size: number
  /** `re` and `im` get the bins 0 to size / 2 (size / 2 + 1 of them). */
  forward(input: Float64Array, re: Float64Array, im: Float64Array): void
  /** Gives back what `forward` was given: scaled by 1 / size. */
  inverse(re: Float64Array, im: Float64Array, output: Float64Array): void
}

const cache = new Map<number, RealFft>()

/** One transform for each length; its tables are shared, so calls must not interleave. */
export const realFft = (size: number): RealFft => {
  const known = cache.get(size)
  if (known) return known
  const made = createRealFft(size)
  cache.set(size, made)
  return made
}

const createRealFft = (size: number): RealFft => {
  const half = size >> 1
  const bits = Math.log2(half)
  const reversed = new Uint32Array(half)
  for (let i = 0; i < half; i++) {
    let r = 0
    for (let b = 0; b < bits; b++) r |= ((i >> b) & 1) << (bits - 1 - b)
    reversed[i] = r
  }
  const cos = new Float64Array(half)
  const sin = new Float64Array(half)
  for (let i = 0; i < half; i++) {
    cos[i] = Math.cos((2 * Math.PI * i) / size)
    sin[i] = Math.sin((2 * Math.PI * i) / size)
  }
  const zr = new Float64Array(half)
  const zi = new Float64Array(half)

  /** In place on zr, zi, already in bit-reversed order. */
  const butterflies = () => {
    for (let i = 0; i < half; i += 2) {
      const r = zr[i + 1]!
      const m = zi[i + 1]!
      zr[i + 1] = zr[i]! - r
      zi[i + 1] = zi[i]! - m
      zr[i] = zr[i]! + r
      zi[i] = zi[i]! + m
    }
    for (let length = 4; length <= half; length <<= 1) {
      const wing = length >> 1
      const step = size / length
      for (let start = 0; start < half; start += length) {
        for (let j = 0, t = 0; j < wing; j++, t += step) {
          const wr = cos[t]!
          const wi = -sin[t]!
          const a = start + j
          const b = a + wing
          const br = zr[b]!
          const bi = zi[b]!
          const r = br * wr - bi * wi
          const m = br * wi + bi * wr
          zr[b] = zr[a]! - r
          zi[b] = zi[a]! - m
          zr[a] = zr[a]! + r
          zi[a] = zi[a]! + m
        }
      }
    }
  }

  return {
    size,
    forward: (input, re, im) => {
      for (let i = 0; i < half; i++) {
        const at = reversed[i]! << 1
        zr[i] = input[at]!
        zi[i] = input[at + 1]!
      }
      butterflies()
      re[0] = zr[0]! + zi[0]!
      im[0] = 0
      re[half] = zr[0]! - zi[0]!
      im[half] = 0
      for (let k = 1, m = half - 1; k <= m; k++, m--) {
        const er = (zr[k]! + zr[m]!) / 2
        const ei = (zi[k]! - zi[m]!) / 2
        const or = (zi[k]! + zi[m]!) / 2
        const oi = (zr[m]! - zr[k]!) / 2
        const tr = or * cos[k]! + oi * sin[k]!
        const ti = oi * cos[k]! - or * sin[k]!
        re[k] = er + tr
        im[k] = ei + ti
        re[m] = er - tr
        im[m] = ti - ei
      }
    },
    inverse: (re, im, output) => {
      // The forward split undone; a conjugated forward transform is the inverse one.
      const er0 = (re[0]! + re[half]!) / 2
      const or0 = (re[0]! - re[half]!) / 2
      zr[0] = er0
      zi[0] = -or0
      for (let k = 1, m = half - 1; k <= m; k++, m--) {
        const er = (re[k]! + re[m]!) / 2
        const ei = (im[k]! - im[m]!) / 2
        const tr = (re[k]! - re[m]!) / 2
        const ti = (im[k]! + im[m]!) / 2
        const or = tr * cos[k]! - ti * sin[k]!
        const oi = tr * sin[k]! + ti * cos[k]!
        const rk = reversed[k]!
        const rm = reversed[m]!
        zr[rk] = er - oi
        zi[rk] = -(ei + or)
        zr[rm] = er + oi
        zi[rm] = -(or - ei)
      }
      butterflies()
      for (let i = 0; i < half; i++) {
        output[i << 1] = zr[i]! / half
        output[(i << 1) + 1] = -zi[i]! / half
      }
    }
  }
}
