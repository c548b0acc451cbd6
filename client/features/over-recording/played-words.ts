// What is played over, in numbers and words.
import type { Player, PlayerLoop } from '@client/transport/player'
import { leadSec, tailSec, type TryCut } from '@shared/practice/over-recording'
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'

const sameSpan = (a: Span, b: Span): boolean =>
  Math.abs(a.startSec - b.startSec) < 0.02 && Math.abs(a.endSec - b.endSec) < 0.02

/** The desk's loop with its rest and its ladder where it goes round the same span, else a plain one. */
export const loopOver = (span: Span, deskLoop: PlayerLoop | null): PlayerLoop =>
  deskLoop && sameSpan(deskLoop.span, span) ? { ...deskLoop, span } : { span }

const percent = (rate: number): string => `${Math.round(rate * 100)} %`

/** "At 70 %, as set on the desk." */
export const speedWords = ({ rate }: Pick<Player, 'rate'>, loop: PlayerLoop | null): string =>
  loop?.ladder
    ? `From ${percent(loop.ladder.from)} to ${percent(loop.ladder.to)}, as the desk’s loop does.`
    : `At ${percent(rate)}, as set on the desk.`

/** The part of the take that a try was played over, without the moments before and after. */
export const playedSpan = ({ placeSec, frames, rate }: TryCut, sampleRate: number, durationSec: Sec): Span => {
  const startSec = Math.max(0, placeSec + leadSec * rate)
  const endSec = Math.min(durationSec, placeSec + (frames / sampleRate - tailSec) * rate)
  return { startSec, endSec: Math.max(startSec, endSec) }
}
