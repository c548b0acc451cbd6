// Where a note is heard to begin, measured in samples: used to learn the renderer's delay and to check what was committed.

const size = 1024
const bins = 200
const hann = Float64Array.from({ length: size }, (_, n) => 0.5 - 0.5 * Math.cos((2 * Math.PI * n) / size))

/** In-place radix-2 transform (Cooley and Tukey 1965). */
function transform(re: Float64Array, im: Float64Array) {
  for (let i = 1, j = 0; i < size; i++) {
    let bit = size >> 1
    for (; j & bit; bit >>= 1) j ^= bit
    j ^= bit
    if (i < j) {
      ;[re[i], re[j]] = [re[j] ?? 0, re[i] ?? 0]
      ;[im[i], im[j]] = [im[j] ?? 0, im[i] ?? 0]
    }
  }
  for (let span = 2; span <= size; span *= 2) {
    for (let k = 0; k < span / 2; k++) {
      const [c, s] = [Math.cos((-2 * Math.PI * k) / span), Math.sin((-2 * Math.PI * k) / span)]
      for (let a = k; a < size; a += span) {
        const b = a + span / 2
        const [x, y] = [(re[b] ?? 0) * c - (im[b] ?? 0) * s, (re[b] ?? 0) * s + (im[b] ?? 0) * c]
        re[b] = (re[a] ?? 0) - x
        im[b] = (im[a] ?? 0) - y
        re[a] = (re[a] ?? 0) + x
        im[a] = (im[a] ?? 0) + y
      }
    }
  }
}

function logSpectrum(samples: Float32Array, from: number): Float64Array {
  const re = hann.map((weight, n) => weight * (samples[from + n] ?? 0))
  const im = new Float64Array(size)
  transform(re, im)
  return Float64Array.from({ length: bins }, (_, bin) => Math.log1p(50 * Math.hypot(re[bin] ?? 0, im[bin] ?? 0)))
}

/**
 * Seconds of the largest spectral flux near a moment: log magnitudes up to 8.6 kHz, frames of 23 ms every millisecond,
 * each compared with the frame 8 ms before; the time is the middle between the two. Energy alone is no judge here: the
 * low string swings slower than a useful window.
 */
export function attackNear(samples: Float32Array, rate: number, sec: number, before = 0.045, after = 0.045): number {
  const hop = Math.round(rate / 1000)
  const start = Math.round((sec - before) * rate) - size / 2 - 4 * hop
  const count = Math.round((before + after) * 1000)
  const frames = Array.from({ length: count + 9 }, (_, index) => logSpectrum(samples, start + index * hop))
  let best = { flux: -1, index: 0 }
  for (let index = 0; index <= count; index++) {
    const [then, now] = [frames[index], frames[index + 8]]
    let flux = 0
    for (let bin = 0; bin < bins; bin++) flux += Math.max(0, (now?.[bin] ?? 0) - (then?.[bin] ?? 0))
    if (flux > best.flux) best = { flux, index }
  }
  return (start + (best.index + 4) * hop + size / 2) / rate
}

export function quantile(values: number[], share: number): number {
  const sorted = [...values].sort((a, b) => a - b)
  return sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))] ?? Number.NaN
}
