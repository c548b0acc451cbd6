// What a converter makes of samples between them: peaks that no sample shows.

/** Places looked at between two samples, and samples looked at on either side (as ITU-R BS.1770, annex 2: four times, 12 taps). */
const PHASES = 4
const SIDE = 6
const TAPS = SIDE * 2

/** Frames by which a peak is known later than its sample. */
export const truePeakDelay = SIDE

/**
 * Follows the true peak of one channel: `push` takes a sample and gives the largest magnitude on the sample `truePeakDelay`
 * frames back and at the quarters of the way on to the next one and back to the one before it. Method of ITU-R BS.1770,
 * annex 2 (interpolation four times), with a Hann-windowed sinc of our own; a sine up to a quarter of the rate is read within
 * 0.2 dB. Only peaks over `floor` are looked for between samples, which spares the work in quiet places.
 */
export const createTruePeak = (floor = 0) => {
  const kernel = kernelOf()
  // What interpolation can make of samples of 1 at most: with all samples under its share nothing passes the floor.
  const wakes = floor / largestGain(kernel)
  // Written twice so that the last samples always lie in one piece.
  const recent = new Float64Array(TAPS * 2)
  let [at, awake, before] = [0, 0, 0]
  const between = (phase: number): number => {
    let sum = 0
    for (let k = 0; k < TAPS; k += 1) sum += (kernel[phase * TAPS + k] as number) * (recent[at + k] as number)
    return Math.abs(sum)
  }
  return {
    push(sample: number): number {
      recent[at] = recent[at + TAPS] = sample
      at = at + 1 === TAPS ? 0 : at + 1
      if (Math.abs(sample) >= wakes) awake = TAPS
      else if (awake > 0) awake -= 1
      // recent[at + k] are the samples, oldest first; the centre and the one after it are SIDE - 1 and SIDE.
      const here = Math.abs(recent[at + SIDE - 1] as number)
      const onward = awake > 0 ? Math.max(between(0), between(1), between(2)) : 0
      const peak = Math.max(here, onward, before)
      before = onward
      return peak
    },
    clear(): void {
      recent.fill(0)
      at = awake = before = 0
    }
  }
}

/** Weights of the samples for one, two and three quarters of the way from sample SIDE - 1 to SIDE. */
const kernelOf = (): Float64Array => {
  const kernel = new Float64Array((PHASES - 1) * TAPS)
  for (let phase = 1; phase < PHASES; phase += 1) {
    for (let k = 0; k < TAPS; k += 1) {
      const away = k - (SIDE - 1) - phase / PHASES
      const window = 0.5 + 0.5 * Math.cos((Math.PI * away) / (SIDE + 0.5))
      kernel[(phase - 1) * TAPS + k] = (Math.sin(Math.PI * away) / (Math.PI * away)) * window
    }
  }
  return kernel
}

const largestGain = (kernel: Float64Array): number =>
  Math.max(
    ...[0, 1, 2].map((phase) => kernel.slice(phase * TAPS, (phase + 1) * TAPS).reduce((sum, w) => sum + Math.abs(w), 0))
  )
