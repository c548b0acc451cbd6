// Reads a stream at another rate: windowed-sinc interpolation (Smith & Gossett 1984, "A flexible sampling-rate conversion
// method"), the low-pass lowered when the stream is read faster than it was made, so that nothing folds back.

const zeroCrossings = 24
const phases = 512
const beta = 9

const bessel0 = (x: number): number => {
  let sum = 1
  let term = 1
  for (let k = 1; k < 40; k++) {
    term *= (x / (2 * k)) ** 2
    sum += term
  }
  return sum
}

/** Right half of the kernel, `phases` steps for each zero crossing, and one more. */
const kernel = (() => {
  const made = new Float64Array(zeroCrossings * phases + 2)
  for (let i = 0; i <= zeroCrossings * phases; i++) {
    const x = i / phases
    const taper = bessel0(beta * Math.sqrt(Math.max(0, 1 - (x / zeroCrossings) ** 2))) / bessel0(beta)
    made[i] = (x === 0 ? 1 : Math.sin(Math.PI * x) / (Math.PI * x)) * taper
  }
  return made
})()

/** Input frames on each side of a place that reading at `ratio` looks at. */
export const kernelReach = (ratio: number): number => Math.ceil(zeroCrossings * Math.max(1, ratio)) + 1

/** The value at the place `at` (a fraction) of `data`, read `ratio` times as fast as it was made. */
export const readAt = (data: Float32Array | Float64Array, at: number, ratio: number): number => {
  const narrow = ratio > 1 ? 1 / ratio : 1
  const reach = zeroCrossings / narrow
  const first = Math.ceil(at - reach)
  const last = Math.floor(at + reach)
  const step = phases * narrow
  let sum = 0
  for (let i = first; i <= last; i++) {
    const x = Math.abs(i - at) * step
    const whole = x | 0
    const low = kernel[whole]!
    sum += data[i]! * (low + (kernel[whole + 1]! - low) * (x - whole))
  }
  return sum * narrow
}
