import { createBarGrid } from '@shared/timing/bar-grid'
import { beatOfPulse, pulsesPerBar } from '@shared/timing/meter'
import { rational } from '@shared/timing/rational'
import { lastAtOrBelow } from '@shared/timing/search'
import type { BarMapBody, Meter, Position, Span } from '@shared/timing/types'
import { isSoundBarMap } from '@shared/timing/validate-bar-map'
import type { BarIndex, Beats, Sec } from '@shared/units'

export interface BeatPlace {
  sec: Sec
  position: Position
}

/**
 * Which moment of the take is which bar and beat. Every function is total; a second that is no number counts as 0.
 * `secAt(positionAt(s))` is within a nanosecond of s between 15 and 400 beats a minute; seconds a nanosecond or more apart
 * have places apart, in the same order.
 */
export interface BarMap {
  meterAt(bar: BarIndex): Meter
  positionAt(sec: Sec): Position
  secAt(position: Position): Sec
  /** Beats of the lower figure from bar 1, beat 1 (0 there), counted continuously through meter changes. */
  beatsAt(sec: Sec): Beats
  secAtBeats(beats: Beats): Sec
  /** Felt beats a minute. On an anchor: the tempo from there on. */
  tempoAt(sec: Sec): number
  barAt(sec: Sec): BarIndex
  /** Moment of a bar's line. */
  barSec(bar: BarIndex): Sec
  barSpan(bar: BarIndex): Span
  /** First bar's line to last bar's end. */
  barsSpan(firstBar: BarIndex, lastBar: BarIndex): Span
  /** Bars that share sound with the span; a point is in one bar. */
  barsIn(span: Span): BarIndex[]
  /** First and last bar of a take that lasts so long. */
  barRange(durationSec: Sec): { firstBar: BarIndex; lastBar: BarIndex }
  /** The felt beats of a bar in time. */
  beatsOf(bar: BarIndex): BeatPlace[]
}

/** What `barsIn` and `barRange` go through at most: ten hours at a bar a third of a second. */
export const MAX_BARS = 100_000

// A quarter of the promised nanosecond: within it a second is the plain fraction of a beat it was made from.
const PLAIN_SEC = 0.25e-9

interface Knot {
  sec: Sec
  wholeNotes: number
  position: Position
}

/** The bar map of a body; null with fewer than two anchors or when the body is not sound (see `validateBarMap`). */
export const createBarMap = (body: BarMapBody): BarMap | null => {
  if (body.anchors.length < 2 || !isSoundBarMap(body)) return null
  const grid = createBarGrid(body.meters)
  const knots: Knot[] = body.anchors.map(({ sec, position }) => ({
    sec,
    position,
    wholeNotes: grid.wholeNotesAt(position)
  }))
  const secPerWhole = knots
    .slice(1)
    .map((knot, i) => (knot.sec - (knots[i] as Knot).sec) / (knot.wholeNotes - (knots[i] as Knot).wholeNotes))

  // Before the first anchor the first stretch goes on, after the last one the last.
  const stretchBy = (key: (knot: Knot) => number, value: number) => {
    const index = Math.min(Math.max(0, lastAtOrBelow(knots, key, value)), knots.length - 2)
    return { from: knots[index] as Knot, to: knots[index + 1] as Knot, pace: secPerWhole[index] as number }
  }
  const bySec = (sec: Sec) => stretchBy((knot) => knot.sec, sec)

  const wholeNotesAtSec = (sec: Sec): number => {
    const { from, pace } = bySec(sec)
    return from.wholeNotes + (sec - from.sec) / pace
  }
  const secAtWholeNotes = (wholeNotes: number): Sec => {
    const { from, to, pace } = stretchBy((knot) => knot.wholeNotes, wholeNotes)
    // From the nearer anchor, so that anchors are met exactly and rounding never grows along a stretch.
    const near = Math.abs(wholeNotes - to.wholeNotes) < Math.abs(wholeNotes - from.wholeNotes) ? to : from
    return near.sec + (wholeNotes - near.wholeNotes) * pace
  }

  const positionAt = (given: Sec): Position => {
    const sec = finite(given)
    const { from, to, pace } = bySec(sec)
    const near = to.sec - sec < sec - from.sec ? to : from
    if (Math.abs(sec - near.sec) <= PLAIN_SEC) return near.position
    return grid.placeAtWholeNotes(near.wholeNotes + (sec - near.sec) / pace, PLAIN_SEC / pace)
  }
  const secAt = (position: Position): Sec => finite(secAtWholeNotes(grid.wholeNotesAt(position)))
  const barSec = (bar: BarIndex): Sec => secAt({ bar, beat: rational(1) })
  const barAt = (sec: Sec): BarIndex => positionAt(sec).bar

  const barsIn = ({ startSec, endSec }: Span): BarIndex[] => {
    const first = barAt(startSec)
    const end = positionAt(Math.max(finite(startSec), finite(endSec)))
    const endsOnLine = end.beat.n === end.beat.d && end.bar > first
    const count = Math.min(end.bar - first + (endsOnLine ? 0 : 1), MAX_BARS)
    return Array.from({ length: count }, (_, i) => first + i)
  }

  return {
    meterAt: grid.meterAt,
    positionAt,
    secAt,
    beatsAt: (sec) => grid.beatsAtWholeNotes(wholeNotesAtSec(finite(sec))),
    secAtBeats: (beats) => secAtWholeNotes(grid.wholeNotesAtBeats(finite(beats))),
    tempoAt: (given) => {
      const sec = finite(given)
      const { lower, pulse } = grid.meterAt(barAt(sec))
      return 60 / ((bySec(sec).pace * pulse) / lower)
    },
    barAt,
    barSec,
    barSpan: (bar) => ({ startSec: barSec(bar), endSec: barSec(bar + 1) }),
    barsSpan: (firstBar, lastBar) => ({
      startSec: barSec(Math.min(firstBar, lastBar)),
      endSec: barSec(Math.max(firstBar, lastBar) + 1)
    }),
    barsIn,
    barRange: (durationSec) => {
      const bars = barsIn({ startSec: 0, endSec: durationSec })
      const firstBar = bars[0] ?? barAt(0)
      return { firstBar, lastBar: bars.at(-1) ?? firstBar }
    },
    beatsOf: (bar) => {
      const meter = grid.meterAt(bar)
      return Array.from({ length: pulsesPerBar(meter) }, (_, i) => {
        const position = { bar, beat: beatOfPulse(i + 1, meter) }
        return { position, sec: secAt(position) }
      })
    }
  }
}

const finite = (value: number): number => (Number.isFinite(value) ? value : 0)
