// How loud the input is, as a share of full scale and on a scale of decibels for the eye.

/** Quieter than this is an empty bar, dB below full scale. */
export const floorDb = -60
/** From here on the tops of the waves are cut off, or nearly. */
export const tooLoudPeak = 0.98
export const holdMs = 1500
/** The words stay long enough to be read. */
export const tooLoudMs = 3000

export const peakOf = (samples: Float32Array): number => {
  let peak = 0
  for (const sample of samples) {
    const size = Math.abs(sample)
    if (size > peak) peak = size
  }
  return peak
}

/** 0 at the floor, 1 at full scale. */
export const shareOfPeak = (peak: number): number => {
  if (!(peak > 0)) return 0
  return Math.min(1, Math.max(0, 1 - (20 * Math.log10(peak)) / floorDb))
}

export interface LevelView {
  share: number
  heldShare: number
  isTooLoud: boolean
}

/** A meter that remembers the highest peak for a moment. `read` takes the newest peak and the time in ms. */
export const createLevelMeter = () => {
  let held = 0
  let heldAtMs = -Infinity
  let loudAtMs = -Infinity
  return {
    read: (peak: number, nowMs: number): LevelView => {
      if (peak >= held || nowMs - heldAtMs > holdMs) {
        held = peak
        heldAtMs = nowMs
      }
      if (peak >= tooLoudPeak) loudAtMs = nowMs
      return { share: shareOfPeak(peak), heldShare: shareOfPeak(held), isTooLoud: nowMs - loudAtMs < tooLoudMs }
    }
  }
}
