// The bar map of a take that was played over another one: the same bars, at the new take's own seconds.
import { createBarGrid } from '@shared/timing/bar-grid'
import { createBarMap } from '@shared/timing/bar-map'
import { rational } from '@shared/timing/rational'
import { lastAtOrBelow } from '@shared/timing/search'
import type { Anchor, BarMapBody, FormMark, MeterMark, Position } from '@shared/timing/types'
import { MIN_ANCHOR_GAP_SEC, validateBarMap } from '@shared/timing/validate-bar-map'
import type { BarIndex, Sec } from '@shared/units'

/** How a take lies along the one it was played over. */
export interface OverPlace {
  /** Second of the other take that belongs to this one's second 0. */
  placeSec: Sec
  /** Seconds of the other take in one of this: 0.7 when it was played at 70 %. */
  rate: number
  durationSec: Sec
}

/**
 * Bars, meters and marks of the form that lie within the new take, counted as before; straight time in between stays straight,
 * so that every second of the new take is the place it was played over. Null without a bar map, or where none can be made.
 */
export const overBarMap = (source: BarMapBody, over: OverPlace, newId: () => string): BarMapBody | null => {
  const { placeSec, rate, durationSec } = over
  const barMap = createBarMap(source)
  if (!barMap || !(rate > 0) || !(durationSec > 0) || !Number.isFinite(placeSec)) return null
  const endSec = placeSec + durationSec * rate
  const grid = createBarGrid(source.meters)
  /** A felt beat beside a second, as an anchor of the old map. */
  const beatBeside = (sec: Sec, side: 'before' | 'after'): Anchor => {
    const { whole, part } = grid.pulsesAt(barMap.positionAt(sec))
    const position = grid.placeAtPulses({ whole: whole + (side === 'after' && part.n > 0 ? 1 : 0), part: rational(0) })
    return { id: newId(), sec: barMap.secAt(position), position }
  }
  // The tempo at both ends is told by one place outside: a beat, or the anchor where the tempo changes.
  const { anchors } = source
  const before = lastAtOrBelow(anchors, ({ sec }) => sec, placeSec)
  const first = later(anchors[before], beatBeside(placeSec, 'before'))
  const last = earlier(
    anchors.find(({ sec }) => sec >= endSec),
    beatBeside(endSec, 'after')
  )
  const inside = anchors.filter(({ sec }) => sec > placeSec && sec < endSec)
  const moved = [first, ...inside, last].map((anchor) => ({ ...anchor, sec: (anchor.sec - placeSec) / rate }))
  const [firstBar, lastBar] = [barMap.barAt(placeSec), barMap.barAt(endSec)]
  const body: BarMapBody = {
    anchors: spaced(moved),
    meters: metersWithin(source.meters, firstBar, lastBar),
    marks: marksWithin(source.marks, firstBar, lastBar)
  }
  return validateBarMap(body).ok && body.anchors.length >= 2 ? body : null
}

const later = (a: Anchor | undefined, b: Anchor): Anchor => (a && a.sec >= b.sec ? a : b)
const earlier = (a: Anchor | undefined, b: Anchor): Anchor => (a && a.sec <= b.sec ? a : b)

/** Anchors that have come too near to each other, or are one place, are one. */
const spaced = (anchors: readonly Anchor[]): Anchor[] =>
  anchors.reduce<Anchor[]>((kept, anchor) => {
    const before = kept.at(-1)
    const isApart =
      !before || (anchor.sec - before.sec >= MIN_ANCHOR_GAP_SEC && !isSame(anchor.position, before.position))
    return isApart ? [...kept, anchor] : kept
  }, [])

const isSame = (a: Position, b: Position): boolean => a.bar === b.bar && a.beat.n === b.beat.n && a.beat.d === b.beat.d

/** The meter changes within, and the meter that holds at the first bar from where it was written. */
const metersWithin = (meters: readonly MeterMark[], firstBar: BarIndex, lastBar: BarIndex): MeterMark[] => {
  const held = Math.max(
    0,
    lastAtOrBelow(meters, ({ bar }) => bar, firstBar)
  )
  return meters.filter(({ bar }, index) => index === held || (index > held && bar <= lastBar))
}

/** The marks within, and the one that holds where the take begins, moved there. */
const marksWithin = (marks: readonly FormMark[], firstBar: BarIndex, lastBar: BarIndex): FormMark[] => {
  const inside = marks.filter(({ bar }) => bar > firstBar && bar <= lastBar)
  const held = marks[lastAtOrBelow(marks, ({ bar }) => bar, firstBar)]
  if (!held || held.bar > firstBar) return inside
  const formBar = held.formBar === null ? null : held.formBar + firstBar - held.bar
  return [{ bar: firstBar, formBar, newPass: held.formBar !== null }, ...inside]
}
