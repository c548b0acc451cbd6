// Low-pass and high-pass sections of second order in a row, safe to retune while sound runs through them.

export type SectionKind = 'low-pass' | 'high-pass'

export interface Cascade {
  /** Takes another cutoff. May be called for every frame. */
  tune(hz: number): void
  /** One sample of one channel through all sections. */
  run(channel: number, sample: number): number
  /** Forgets what it heard. */
  clear(): void
}

/**
 * Quality factors of the second-order sections that make a Butterworth filter of even order: 1 / (2 cos of the pole angles),
 * for order 8: 0.510, 0.601, 0.900, 2.563 (S. Butterworth 1930; the table is in every filter handbook).
 */
export const butterworthQualities = (order: number): number[] =>
  Array.from({ length: order / 2 }, (_, k) => 1 / (2 * Math.cos((Math.PI * (2 * k + 1)) / (2 * order))))

/**
 * Butterworth filter of an even order. The sections have the transfer function of the low-pass and high-pass in R.
 * Bristow-Johnson, "Cookbook formulae for audio EQ biquad filter coefficients" (bilinear transform, cutoff warped into place),
 * built as trapezoidal state-variable filters (V. Zavalishin, "The Art of VA Filter Design", ch. 4), whose state stays
 * meaningful when the cutoff moves: a direct-form biquad would click. Cutoffs are kept between 1 Hz and 0.45 of the rate.
 */
export const createCascade = (
  kind: SectionKind,
  order: number,
  sampleRate: number,
  channels: number,
  cutoffHz: number
): Cascade => {
  const dampings = Float64Array.from(butterworthQualities(order), (quality) => 1 / quality)
  const sections = dampings.length
  const [a1, a2, a3] = [new Float64Array(sections), new Float64Array(sections), new Float64Array(sections)]
  const first = new Float64Array(sections * channels)
  const second = new Float64Array(sections * channels)
  const isLow = kind === 'low-pass'

  const tune = (hz: number): void => {
    const g = Math.tan((Math.PI * Math.min(Math.max(hz, 1), sampleRate * 0.45)) / sampleRate)
    for (let s = 0; s < sections; s += 1) {
      const inner = 1 / (1 + g * (g + (dampings[s] as number)))
      a1[s] = inner
      a2[s] = g * inner
      a3[s] = g * g * inner
    }
  }
  tune(cutoffHz)

  return {
    tune,
    run(channel, sample) {
      let x = sample
      for (let s = 0, at = channel * sections; s < sections; s += 1, at += 1) {
        const s1 = first[at] as number
        const s2 = second[at] as number
        const rest = x - s2
        const band = (a1[s] as number) * s1 + (a2[s] as number) * rest
        const low = s2 + (a2[s] as number) * s1 + (a3[s] as number) * rest
        first[at] = settle(2 * band - s1)
        second[at] = settle(2 * low - s2)
        x = isLow ? low : x - (dampings[s] as number) * band - low
      }
      return x
    },
    clear() {
      first.fill(0)
      second.fill(0)
    }
  }
}

// Far below hearing; numbers that fade on into the denormal range would cost a processor dearly in silence.
const settle = (state: number): number => (state < 1e-30 && state > -1e-30 ? 0 : state)
