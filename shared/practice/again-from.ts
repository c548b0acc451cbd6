import type { BarMap } from '@shared/timing/bar-map'
import type { Sec } from '@shared/units'

/** A bar without a bar map: four beats at 120 a minute. Common practice, no source. */
const PLAIN_BAR_SEC = 2
/** Playing has a bar line reached a hair before it is reported. */
const NEAR_LINE_SEC = 0.02

/**
 * "Again from two bars before": the line of the bar so many bars before the one that sounds at `sec`, wherever in it that is; on
 * a line the bars are counted from there, so that pressing again goes on back. With 0 the bar's own line. Never before the
 * start of the take. Without a bar map two seconds stand for a bar.
 */
export const placeBefore = (map: BarMap | null, sec: Sec, bars: number): Sec => {
  const place = map ? map.barSec(map.barAt(sec + NEAR_LINE_SEC) - Math.round(bars)) : sec - bars * PLAIN_BAR_SEC
  return Number.isFinite(place) ? Math.max(0, place) : 0
}
