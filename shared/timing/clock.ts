// How far the server's clock is from this machine's, judged from exchanges of messages.

/** One exchange; all in milliseconds, sent and received by the local clock (one that never jumps), server by the server's. */
export interface ClockSample {
  sentMs: number
  serverMs: number
  receivedMs: number
}

export interface ClockEstimate {
  /** Server time minus local time. */
  offsetMs: number
  /** The offset is right within this, whichever way the delay was shared out. */
  uncertaintyMs: number
  /** Round trip of the exchange it rests on. */
  delayMs: number
}

export interface ClockEstimator {
  /** Takes a sample in; false for one that cannot be (no numbers, or received before it was sent). */
  add(sample: ClockSample): boolean
  /** Best estimate at a local moment; null before the first sample. */
  estimate(localMs: number): ClockEstimate | null
  /** Server time at a local moment; null before the first sample. */
  serverNow(localMs: number): number | null
}

/** Exchanges that are kept, as in the clock filter of RFC 5905, section 10. */
export const CLOCK_STAGES = 8
/** Bound of two clocks' drift apart: 15 parts in a million, PHI of RFC 5905, section 7.1. */
export const CLOCK_DRIFT = 15e-6

/**
 * Of the last eight exchanges the one with the least delay counts, ageing by the drift bound (clock filter of RFC 5905,
 * section 10). Its offset is server - (sent + received) / 2, wrong by at most half the round trip: F. Cristian,
 * "Probabilistic clock synchronization", Distributed Computing 3 (1989). Where a new exchange contradicts that bound,
 * one of the clocks was set or slept, and the exchanges before it are dropped.
 */
export const createClockEstimator = (): ClockEstimator => {
  let samples: ClockSample[] = []

  const best = (localMs: number): ClockEstimate | null =>
    samples
      .map((sample) => judge(sample, localMs))
      .reduce<ClockEstimate | null>((a, b) => (a && a.uncertaintyMs <= b.uncertaintyMs ? a : b), null)

  return {
    add(sample) {
      const { sentMs, serverMs, receivedMs } = sample
      if (![sentMs, serverMs, receivedMs].every(Number.isFinite) || receivedMs < sentMs) return false
      const [now, known] = [judge(sample, receivedMs), best(receivedMs)]
      const contradicts = known && Math.abs(known.offsetMs - now.offsetMs) > known.uncertaintyMs + now.uncertaintyMs
      samples = [...(contradicts ? [] : samples.slice(1 - CLOCK_STAGES)), sample]
      return true
    },
    estimate: best,
    serverNow: (localMs) => {
      const estimate = best(localMs)
      return estimate && localMs + estimate.offsetMs
    }
  }
}

const judge = ({ sentMs, serverMs, receivedMs }: ClockSample, localMs: number): ClockEstimate => ({
  offsetMs: serverMs - (sentMs + receivedMs) / 2,
  delayMs: receivedMs - sentMs,
  uncertaintyMs: (receivedMs - sentMs) / 2 + Math.abs(localMs - receivedMs) * CLOCK_DRIFT
})
