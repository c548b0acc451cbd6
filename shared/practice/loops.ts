// From a loop as it is kept to what a player turns round in.
import type { SpeedLadder } from '@shared/practice/ladder'
import type { BarMap } from '@shared/timing/bar-map'
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'

/** A beat without a bar map: 120 a minute. Common practice, no source. */
const PLAIN_BEAT_SEC = 0.5

/**
 * A rest of so many felt beats between two passes, as seconds of take (at half speed it lasts twice as long): in the tempo the
 * loop ends in, so that its first note comes back in time. Without a bar map a beat is half a second.
 */
export const restSecFor = (map: BarMap | null, span: Span, restBeats: number): Sec => {
  if (!(restBeats > 0)) return 0
  // A hair before the end: on the last line the tempo would be that of what is not played.
  return restBeats * (map ? 60 / map.tempoAt(Math.max(span.startSec, span.endSec - 1e-6)) : PLAIN_BEAT_SEC)
}

/** The loop a player is given; the speed to set first is the loop's own `rate` (none: as it is). */
export const loopFrom = (
  saved: { span: Span; ladder: SpeedLadder | null; restBeats: number },
  map: BarMap | null
): { span: Span; restSec?: Sec; ladder?: SpeedLadder } => ({
  span: saved.span,
  ...(saved.restBeats > 0 ? { restSec: restSecFor(map, saved.span, saved.restBeats) } : {}),
  ...(saved.ladder ? { ladder: saved.ladder } : {})
})
