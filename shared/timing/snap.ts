import type { BarMap } from '@shared/timing/bar-map'
import { lastAtOrBelow } from '@shared/timing/search'
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'

export type Snap = 'bar' | 'beat' | 'none'

/** What a moment snaps to lies inside the take. */
export interface SnapSetting {
  barMap: BarMap | null
  durationSec: Sec
}

/** The nearest bar line or felt beat; the moment itself for 'none' and without a bar map. */
export const snapSec = (sec: Sec, snap: Snap, { barMap, durationSec }: SnapSetting): Sec => {
  const grid = barMap && gridAround(barMap, sec, snap)
  return within(grid ? nearest(grid, sec) : sec, durationSec)
}

/**
 * The span grown or shrunk to the nearest bar lines or felt beats, never to nothing: dragged over less than that it is the
 * bar or beat it lies in. Ends may come in either order.
 */
export const snapSpan = (span: Span, snap: Snap, setting: SnapSetting): Span => {
  const [from, to] = [Math.min(span.startSec, span.endSec), Math.max(span.startSec, span.endSec)]
  const ends = { startSec: snapSec(from, snap, setting), endSec: snapSec(to, snap, setting) }
  if (!setting.barMap || snap === 'none' || ends.endSec > ends.startSec) return ends
  const grid = gridAround(setting.barMap, (from + to) / 2, snap)
  const start = lastUpTo(grid, (from + to) / 2) ?? from
  const end = grid.find((line) => line > start) ?? to
  return { startSec: within(start, setting.durationSec), endSec: within(end, setting.durationSec) }
}

/**
 * The moment `steps` bar lines or felt beats on (back when negative); from between two of them the first step goes to the
 * next one. Without a bar map, or for 'none', a step is a tenth of a second.
 */
export const nudgeSec = (sec: Sec, snap: Snap, steps: number, { barMap, durationSec }: SnapSetting): Sec => {
  if (!barMap || snap === 'none') return within(sec + steps * 0.1, durationSec)
  let moved = sec
  for (let i = 0; i < Math.abs(Math.trunc(steps)); i += 1) {
    const grid = gridAround(barMap, moved, snap)
    const next: Sec | undefined =
      steps > 0 ? grid.find((line) => line > moved + SAME_SEC) : lastUpTo(grid, moved - SAME_SEC)
    moved = next ?? moved
  }
  return within(moved, durationSec)
}

// Nearer than this a moment is on the line: screens and media clocks round.
const SAME_SEC = 1e-6

/** Bar lines or felt beats from the bar before to the bar after. */
const gridAround = (barMap: BarMap, sec: Sec, snap: Snap): Sec[] => {
  if (snap === 'none') return [sec]
  const bar = barMap.barAt(sec)
  const bars = [bar - 1, bar, bar + 1]
  if (snap === 'bar') return [...bars, bar + 2].map((each) => barMap.barSec(each))
  return [...bars.flatMap((each) => barMap.beatsOf(each).map((beat) => beat.sec)), barMap.barSec(bar + 2)]
}

const lastUpTo = (lines: Sec[], sec: Sec): Sec | undefined => lines[lastAtOrBelow(lines, (line) => line, sec)]

const nearest = (lines: Sec[], sec: Sec): Sec =>
  lines.reduce((best, line) => (Math.abs(line - sec) < Math.abs(best - sec) ? line : best))

const within = (sec: Sec, durationSec: Sec): Sec => Math.min(Math.max(0, sec), Math.max(0, durationSec))
