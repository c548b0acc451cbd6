// Which clicks fall where in the output, to the frame.
import type { PlanPart } from './plan-types.ts'

export interface FrameClick {
  /** Frame of the take. */
  frame: number
  accent: 0 | 1 | 2
}

export type Strike = (outFrame: number, accent: 0 | 1 | 2) => void

/** First index of a click at `frame` or later. Clicks rise. */
const indexFrom = (clicks: readonly FrameClick[], frame: number): number => {
  let [low, high] = [0, clicks.length]
  while (low < high) {
    const middle = (low + high) >> 1
    if ((clicks[middle]?.frame ?? Infinity) < frame) low = middle + 1
    else high = middle
  }
  return low
}

/**
 * Strikes the clicks that begin in the output frames `from` to `to` (half-open) of one part, which goes on until `partEnd`.
 * Each is struck once however the output is cut into blocks and the take into parts: what counts is the whole frame it
 * falls on. A click at a loop's end belongs to what comes after it; a pass that starts a fraction late keeps its first.
 */
export const strikePart = (
  part: PlanPart,
  clicks: readonly FrameClick[],
  from: number,
  to: number,
  partEnd: number,
  strike: Strike
): void => {
  const [first, end] = [Math.max(from, part.outFrame), Math.min(to, partEnd)]
  if (end <= first) return
  if (part.mode === 'counting') {
    for (const { atFrame, accent } of part.counts) {
      const at = Math.round(part.untilFrame + atFrame)
      if (at >= first && at < end) strike(at, accent)
    }
    return
  }
  if (part.speed <= 0 || (part.mode !== 'playing' && part.mode !== 'resting')) return
  const placeAt = (outFrame: number): number => part.sourceFrame + (outFrame - part.outFrame) * part.speed
  for (let n = indexFrom(clicks, placeAt(first - 1)); n < clicks.length; n += 1) {
    const click = clicks[n]
    if (!click || click.frame >= part.endFrame || click.frame >= placeAt(end)) break
    const exact = Math.round(part.outFrame + (click.frame - part.sourceFrame) / part.speed)
    const at = part.isJump ? Math.max(part.outFrame, exact) : exact
    if (at >= first && at < end) strike(at, click.accent)
  }
}
