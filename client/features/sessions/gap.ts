import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'

/** The shortest way from where we are to where we should be, counting through a loop's end. */
export const gapSec = (heard: Sec, wanted: Sec, loop: Span | null): Sec => {
  const straight = wanted - heard
  if (!loop) return straight
  const length = loop.endSec - loop.startSec
  const inside = (sec: Sec): boolean => sec >= loop.startSec - 0.25 && sec <= loop.endSec + 0.25
  if (!inside(heard) || !inside(wanted) || length <= 0) return straight
  return straight - Math.round(straight / length) * length
}
