// What a hand does to the bars of a take, turned into operations. Nothing is changed here; each operation has been tried on
// the body, so a refusal comes with its sentence before anything is sent.
import type { OperationFault } from '@shared/documents/document'
import { err, ok, type Result } from '@shared/result'
import { createBarGrid } from '@shared/timing/bar-grid'
import { createBarMap } from '@shared/timing/bar-map'
import { barMapDocument } from '@shared/timing/bar-map-document'
import type { BarMapOperation } from '@shared/timing/bar-map-schema'
import { add, equal, multiply, rational } from '@shared/timing/rational'
import { timeWords } from '@shared/timing/time-words'
import type { Anchor, BarMapBody, Position } from '@shared/timing/types'
import { MIN_ANCHOR_GAP_SEC } from '@shared/timing/validate-bar-map'
import type { BarIndex, Sec } from '@shared/units'

export type Gesture = Result<BarMapOperation, OperationFault>

/** Ids come from outside (a UUID made by the client), so that a gesture sent twice is one. */
export type NewId = () => string

/** Puts a place at a moment: moves the anchor that is fixed there, or fixes it. Refused past the neighbouring anchors. */
export const dragPlace = (body: BarMapBody, place: Position, sec: Sec, newId: NewId): Gesture => {
  const grid = createBarGrid(body.meters)
  const position = grid.normalize(place)
  const wholeNotes = grid.wholeNotesAt(position)
  const anchor = anchorAt(body, position)
  const others = body.anchors.filter(({ id }) => id !== anchor?.id)
  const before = others.filter((other) => grid.wholeNotesAt(other.position) < wholeNotes).at(-1)
  const after = others.find((other) => grid.wholeNotesAt(other.position) > wholeNotes)
  if (before && sec < before.sec + MIN_ANCHOR_GAP_SEC) return pastNeighbour(position, 'before', before)
  if (after && sec > after.sec - MIN_ANCHOR_GAP_SEC) return pastNeighbour(position, 'after', after)
  return tried(
    body,
    anchor ? { kind: 'moveAnchor', id: anchor.id, sec } : { kind: 'setAnchor', anchor: { id: newId(), sec, position } }
  )
}

/** Puts a bar's line at a moment. */
export const dragBarLine = (body: BarMapBody, bar: BarIndex, sec: Sec, newId: NewId): Gesture =>
  dragPlace(body, lineOf(bar), sec, newId)

/** Moves a bar's line by some seconds (back when negative) from where it is now. */
export const nudgeBarLine = (body: BarMapBody, bar: BarIndex, bySec: Sec, newId: NewId): Gesture => {
  const barMap = createBarMap(body)
  return barMap ? dragBarLine(body, bar, barMap.barSec(bar) + bySec, newId) : err(NO_BARS)
}

/** The sound at `sec` (its nearest felt beat) is bar 1, beat 1. */
export const setBarOneAt = (body: BarMapBody, sec: Sec): Gesture => {
  const position = nearestPulse(body, sec)
  return position ? tried(body, { kind: 'setBarOne', position }) : err(NO_BARS)
}

/** The music begins at `sec` with a pick-up of so many felt beats: bar 1 comes after them. */
export const setPickUp = (body: BarMapBody, sec: Sec, pulses: number): Gesture => {
  const first = nearestPulse(body, sec)
  if (!first) return err(NO_BARS)
  const grid = createBarGrid(body.meters)
  const { whole, part } = grid.pulsesAt(first)
  const position = grid.placeAtPulses({ whole: whole + Math.round(pulses), part })
  return tried(body, { kind: 'setBarOne', position })
}

/** Counts everything so many felt beats later (back when negative): by 1, what was beat 1 is beat 2. */
export const shiftByPulses = (body: BarMapBody, pulses: number): Gesture => {
  const { pulse } = createBarGrid(body.meters).meterAt(1)
  return tried(body, { kind: 'shiftBeats', beats: multiply(rational(Math.round(pulses)), rational(pulse)) })
}

// Long enough to even out a hand's jitter, short enough to follow where the tempo is now.
const PACE_BARS = 4

/**
 * Lays bar lines from the bar at `fromSec` to `toSec` at the tempo of the four bars before, in place of what was fixed there.
 */
export const fillAhead = (body: BarMapBody, fromSec: Sec, toSec: Sec, newId: NewId): Gesture => {
  const barMap = createBarMap(body)
  if (!barMap) return err(NO_BARS)
  const grid = createBarGrid(body.meters)
  const bar = barMap.barAt(fromSec)
  const [startSec, start] = [barMap.barSec(bar), grid.wholeNotesAt(lineOf(bar))]
  const paceStart = lineOf(bar - PACE_BARS)
  const pace = (startSec - barMap.secAt(paceStart)) / (start - grid.wholeNotesAt(paceStart))
  const anchors: Anchor[] = []
  for (let next = bar; ; next += 1) {
    const sec = startSec + (grid.wholeNotesAt(lineOf(next)) - start) * pace
    if (sec > toSec) break
    const known = next === bar ? anchorAt(body, lineOf(bar)) : undefined
    anchors.push({ id: known?.id ?? newId(), sec, position: lineOf(next) })
  }
  if (anchors.length < 2)
    return err({ message: `There is no bar line between ${timeWords(fromSec)} and ${timeWords(toSec)}.` })
  return tried(body, { kind: 'replaceAnchors', fromSec: startSec, toSec, anchors })
}

/**
 * Lays tapped places into the map in place of what was fixed from the first to the last of them, or on to `untilSec` (the end
 * of the take, when all that follows is to be counted from the taps).
 */
export const layTaps = (body: BarMapBody, anchors: Anchor[], untilSec: Sec | null = null): Gesture => {
  const [first, last] = [anchors[0], anchors.at(-1)]
  if (!first || !last) return err({ message: 'Nothing was tapped.' })
  const toSec = Math.max(last.sec, untilSec ?? last.sec)
  return tried(body, { kind: 'replaceAnchors', fromSec: first.sec, toSec, anchors })
}

const NO_BARS: OperationFault = { message: 'Two places must be known before bars can be counted from them.' }

const lineOf = (bar: BarIndex): Position => ({ bar, beat: rational(1) })

const anchorAt = (body: BarMapBody, { bar, beat }: Position): Anchor | undefined =>
  body.anchors.find(({ position }) => position.bar === bar && equal(position.beat, beat))

const tried = (body: BarMapBody, op: BarMapOperation): Gesture => {
  const result = barMapDocument.apply(body, op)
  return result.ok ? ok(op) : result
}

const placeName = ({ bar, beat }: Position): string =>
  beat.n === beat.d ? `Bar ${bar}` : `Beat ${Math.floor(beat.n / beat.d)} of bar ${bar}`

const pastNeighbour = (position: Position, side: 'before' | 'after', neighbour: Anchor): Gesture => {
  const name = placeName(neighbour.position).toLowerCase()
  return err({
    message: `${placeName(position)} cannot come ${side} ${name}, which is fixed at ${timeWords(neighbour.sec)}.`
  })
}

const nearestPulse = (body: BarMapBody, sec: Sec): Position | null => {
  const barMap = createBarMap(body)
  if (!barMap) return null
  const grid = createBarGrid(body.meters)
  const { whole, part } = grid.pulsesAt(barMap.positionAt(sec))
  const isLate = add(part, part).n >= add(part, part).d
  return grid.placeAtPulses({ whole: whole + (isLate ? 1 : 0), part: rational(0) })
}
