// Edits that count the whole map anew. Each gives a body that may be unsound; validateBarMap judges it afterwards.
import { createBarGrid, splitCount, type BarGrid } from '@shared/timing/bar-grid'
import { COMMON_METER, pulsesPerBar } from '@shared/timing/meter'
import { add, multiply, negate, rational, toNumber } from '@shared/timing/rational'
import type { Anchor, BarMapBody, FormMark, Meter, MeterMark, Position, Rational } from '@shared/timing/types'
import type { BarIndex } from '@shared/units'

/** Every anchor `beats` later in the count. */
export const shiftBeats = (body: BarMapBody, beats: Rational): BarMapBody => {
  const grid = createBarGrid(body.meters)
  return placeAnchors(body, ({ position: { bar, beat } }) => grid.normalize({ bar, beat: add(beat, beats) }))
}

/** The place `position` becomes bar 1, beat 1. */
export const setBarOne = (body: BarMapBody, position: Position): BarMapBody => {
  const { bar, beat } = createBarGrid(body.meters).normalize(position)
  const counted = moveBars(body, { from: -Infinity, by: 1 - bar, includeMeterAt: true })
  return shiftBeats(counted, add(rational(1), negate(beat)))
}

/** The felt beats counted from bar 1 times `factor`; meters and marks go to the nearest bar line. */
export const scaleBeats = (body: BarMapBody, factor: 2 | 0.5): BarMapBody => {
  const scaleBar = (bar: BarIndex) => 1 + Math.round((bar - 1) * factor)
  const before = createBarGrid(body.meters)
  const meters = firstOfEachBar(body.meters.map((mark) => ({ ...mark, bar: scaleBar(mark.bar) })))
  const after = createBarGrid(meters)
  const by = factor === 2 ? rational(2) : rational(1, 2)
  const scaled = placeAnchors(body, ({ position }) => {
    const { whole, part } = before.pulsesAt(position)
    const rest = factor === 2 ? 0 : whole - 2 * Math.floor(whole / 2)
    const inner = multiply(add(rational(rest), part), by)
    return after.placeAtPulses(splitCount(inner, factor === 2 ? whole * 2 : Math.floor(whole / 2)))
  })
  const marks = body.marks.map((mark) => ({ ...mark, bar: scaleBar(mark.bar) }))
  return { ...scaled, meters, marks: firstOfEachBar(marks) }
}

/** Another meter from `bar` on (null: none of its own there); later places keep their distance in felt beats. */
export const changeMeter = (body: BarMapBody, bar: BarIndex, meter: Meter | null): BarMapBody => {
  const old = createBarGrid(body.meters)
  // A body without meters is in 4/4 from the start; that must stay true of the bars before the change.
  const implied = body.meters.length === 0 && bar > 1 ? [{ bar: 1, meter: COMMON_METER }] : body.meters
  const meters = [...implied.filter((mark) => mark.bar < bar), ...(meter ? [{ bar, meter }] : [])]
  const line = { bar, beat: rational(1) }
  const carryTo = (grid: BarGrid) => {
    const shift = grid.pulsesAt(line).whole - old.pulsesAt(line).whole
    return (position: Position): Position => {
      const { whole, part } = old.pulsesAt(position)
      return grid.placeAtPulses({ whole: whole + shift, part })
    }
  }
  for (const mark of implied.filter((later) => later.bar > bar)) {
    const grid = createBarGrid(meters)
    const nearest = nearestBarLine(grid, carryTo(grid)({ bar: mark.bar, beat: rational(1) }))
    meters.push({ ...mark, bar: Math.max(nearest, (meters.at(-1)?.bar ?? bar) + 1) })
  }
  const grid = createBarGrid(meters)
  const carry = carryTo(grid)
  const marks = body.marks.map((mark) => ({
    ...mark,
    bar: nearestBarLine(grid, carry({ bar: mark.bar, beat: rational(1) }))
  }))
  return { ...placeAnchors(body, ({ position }) => carry(position)), meters, marks: firstOfEachBar(marks) }
}

/** One bar more at `bar`; it takes the meter of the bar that was there. */
export const insertBar = (body: BarMapBody, bar: BarIndex): BarMapBody =>
  moveBars(body, { from: bar, by: 1, includeMeterAt: false })

/** The bar at `bar` goes with its anchors; a meter or mark at its line stays for the bar that takes its place. */
export const removeBar = (body: BarMapBody, bar: BarIndex): BarMapBody => {
  const stays = <T extends MeterMark | FormMark>(marks: T[]) =>
    marks.some((mark) => mark.bar === bar + 1) ? marks.filter((mark) => mark.bar !== bar) : marks
  const without = {
    anchors: body.anchors.filter(({ position }) => position.bar !== bar),
    meters: stays(body.meters),
    marks: stays(body.marks)
  }
  return moveBars(without, { from: bar + 1, by: -1, includeMeterAt: true })
}

interface BarMove {
  from: BarIndex
  by: number
  /** Whether a meter change right at `from` moves along. */
  includeMeterAt: boolean
}

const moveBars = (body: BarMapBody, { from, by, includeMeterAt }: BarMove): BarMapBody => ({
  anchors: body.anchors.map((anchor) =>
    anchor.position.bar >= from
      ? { ...anchor, position: { ...anchor.position, bar: anchor.position.bar + by } }
      : anchor
  ),
  meters: body.meters.map((mark) =>
    mark.bar > from || (includeMeterAt && mark.bar === from) ? { ...mark, bar: mark.bar + by } : mark
  ),
  marks: body.marks.map((mark) => (mark.bar >= from ? { ...mark, bar: mark.bar + by } : mark))
})

const placeAnchors = (body: BarMapBody, place: (anchor: Anchor) => Position): BarMapBody => ({
  ...body,
  anchors: body.anchors.map((anchor) => ({ ...anchor, position: place(anchor) }))
})

const nearestBarLine = (grid: BarGrid, position: Position): BarIndex => {
  const meter = grid.meterAt(position.bar)
  const pulses = (toNumber(position.beat) - 1) / meter.pulse
  return position.bar + (pulses * 2 >= pulsesPerBar(meter) ? 1 : 0)
}

const firstOfEachBar = <T extends { bar: BarIndex }>(marks: T[]): T[] =>
  marks.filter((mark, i) => i === 0 || mark.bar !== marks[i - 1]?.bar)
