// When a loop has to turn. Pure; the engine feeds it positions from frames, time updates and timers alike.
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'

/** A shorter loop is a buzz, and a media element cannot jump that often. */
export const shortestLoopSec = 0.1

/** Turning this early makes up for the element's own delay in starting the jump. */
const earlySec = 0.01

export const tidyLoop = (span: Span, durationSec: Sec): Span | null => {
  if (!Number.isFinite(span.startSec) || !Number.isFinite(span.endSec) || !(durationSec > 0)) return null
  const startSec = Math.max(0, Math.min(span.startSec, durationSec - shortestLoopSec))
  const endSec = Math.min(durationSec, Math.max(span.endSec, startSec + shortestLoopSec))
  return endSec > startSec ? { startSec, endSec } : null
}

/** True when playing from `before` to `now` has passed the loop's end. Playing on beyond the end on purpose does not turn. */
export const hasToTurn = (span: Span, before: Sec, now: Sec): boolean =>
  before < span.endSec && now >= span.endSec - earlySec

/** Milliseconds of a timer after which to look again: at the end of the loop, and never more than a quarter second blind. */
export const lookAgainMs = (span: Span, now: Sec, rate: number): number => {
  const left = (span.endSec - earlySec - now) / rate
  return Math.max(4, Math.min(250, left > 0 ? left * 1000 : 250))
}

/** Where sound is `elapsed` seconds of take after `from`, going round in the loop if it starts inside it. */
export const wrapInLoop = (span: Span | null, from: Sec, elapsed: Sec): Sec => {
  const straight = from + elapsed
  if (!span || from >= span.endSec || straight < span.endSec) return straight
  const length = span.endSec - span.startSec
  return span.startSec + ((straight - span.startSec) % length)
}
