// What goes into the stretcher and comes out of it. All counts are frames (samples per channel).

/** A recording that can be read anywhere. */
export interface SampleSource {
  readonly channels: number
  readonly sampleRate: number
  readonly frames: number
  /**
   * Copies the frames from `from` on into the arrays, one for each channel, all of one length; silence outside the take.
   * False when some of them are not there yet: then nothing may be used.
   */
  read(from: number, into: readonly Float32Array[]): boolean
}

/**
 * From this output frame on the take runs from `sourceFrame` at `speed`, shifted by `ratio` (2 is an octave up). Both places
 * may be fractions, so that nothing drifts. A leg that goes on where the one before it has arrived is no jump.
 * `isSilent`: nothing sounds and the take stands still (a rest between two passes, a count-in).
 */
export interface Leg {
  outFrame: number
  sourceFrame: number
  speed: number
  ratio: number
  isSilent?: boolean
}

export interface Stretcher {
  /** Output frames rendered so far. */
  readonly outFrame: number
  /** Adds a leg, or with an earlier `outFrame` than the last ones replaces those. Never before what is rendered. */
  schedule(leg: Leg): void
  /** Take frame that belongs to an output frame by the scheduled legs (not counting the latency of any device). */
  sourceFrameAt(outFrame: number): number
  /**
   * Renders the next frames into `out` (one array a channel) from `offset` on. Gives how many: fewer than asked when the
   * source has not got the frames yet.
   */
  render(out: readonly Float32Array[], offset: number, frames: number): number
  /**
   * Does about a millisecond of the work that starting at a source frame takes, for calling ahead of a jump; true when all
   * of it is done. Frames the source has not got are left out.
   */
  prepare(sourceFrame: number): boolean
  /** Source frames that rendering at `sourceFrame` may look at, before and after it. */
  readonly reach: { before: number; after: number }
}
