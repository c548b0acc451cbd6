// Sounds to send through the aids, and what is measured on them.

export const sampleRate = 48_000

export const sine = (hz: number, sec: number, level = 0.5, rate = sampleRate): Float32Array =>
  Float32Array.from({ length: Math.round(sec * rate) }, (_, i) => level * Math.sin((2 * Math.PI * hz * i) / rate))

/** White noise between -level and level. Congruential generator, constants of "Numerical Recipes" (Press et al.), from memory. */
export const noise = (frames: number, seed: number, level = 0.5): Float32Array => {
  let state = seed >>> 0
  return Float32Array.from({ length: frames }, () => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0
    return (state / 2 ** 31 - 1) * level
  })
}

export const rms = (samples: Float32Array): number =>
  Math.sqrt(samples.reduce((sum, sample) => sum + sample * sample, 0) / samples.length)

export const decibels = (ratio: number): number => 20 * Math.log10(ratio)

export const largest = (samples: Float32Array): number =>
  samples.reduce((most, sample) => Math.max(most, Math.abs(sample)), 0)

/** Largest second difference: what makes a click of a smooth sound. */
export const roughness = (samples: Float32Array): number => {
  let most = 0
  for (let i = 2; i < samples.length; i += 1) {
    const bend = (samples[i] as number) - 2 * (samples[i - 1] as number) + (samples[i - 2] as number)
    most = Math.max(most, Math.abs(bend))
  }
  return most
}

/** Calls for the pieces that the sizes cut `frames` into, over and over. */
export const inPieces = (frames: number, sizes: readonly number[], piece: (from: number, to: number) => void): void => {
  for (let from = 0, k = 0; from < frames; k += 1) {
    const to = Math.min(frames, from + (sizes[k % sizes.length] as number))
    piece(from, to)
    from = to
  }
}

/** How many samples of two sounds are not the same bit for bit (minus nought is nought): quicker than comparing as lists. */
export const differing = (a: Float32Array | undefined, b: Float32Array | undefined): number => {
  if (!a || !b || a.length !== b.length) return Infinity
  return a.reduce((count, sample, i) => count + (sample === b[i] ? 0 : 1), 0)
}
