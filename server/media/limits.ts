/** Bounds on one recording and on the processes that read it. */
export type MediaLimits = {
  maxDurationSec: number
  /** Shorter than this is no recording. */
  minDurationSec: number
  /** Silence from the start that is enough to stop reading. */
  maxLeadingSilenceSec: number
  /** Address space of one process, in bytes. */
  memoryBytes: number
}

export const defaultMediaLimits: MediaLimits = {
  maxDurationSec: 6 * 3600,
  minDurationSec: 0.1,
  maxLeadingSilenceSec: 30 * 60,
  memoryBytes: 2 * 1024 ** 3
}

/** Below -60 dB of full scale everywhere counts as silent. */
export const silenceThreshold = 10 ** (-60 / 20)
