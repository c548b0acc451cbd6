// Where comment spans stand under the waveform: stacked in rows where they overlap; where a crowd would make them too
// small to hit, gathered into one sign that opens when looked at from nearer.
import type { Span } from '@shared/timing/types'

export interface Placed<T> {
  kind: 'span'
  item: T
  row: number
  /** From the start of the take, in pixels at the given scale. */
  x: number
  width: number
}

export interface Crowd<T> {
  kind: 'crowd'
  items: T[]
  row: number
  x: number
  width: number
}

/** Room a span takes at least: its letter, and a target of 24 px (WCAG 2.2, 2.5.8). */
export const spanTargetPx = 24
export const spanRows = 3

/**
 * `scale` is pixels per second. Spans keep their order of start (then the longer first); each takes the first free row.
 * What finds none of the rows free goes into a crowd in the row below them.
 */
export const stackSpans = <T extends { span: Span }>(
  items: readonly T[],
  scale: number,
  rows = spanRows
): (Placed<T> | Crowd<T>)[] => {
  const ordered = [...items].sort((a, b) => a.span.startSec - b.span.startSec || b.span.endSec - a.span.endSec)
  const freeFrom = Array.from({ length: rows }, () => -Infinity)
  const placed: (Placed<T> | Crowd<T>)[] = []
  let crowd: Crowd<T> | null = null
  for (const item of ordered) {
    const x = item.span.startSec * scale
    const width = (item.span.endSec - item.span.startSec) * scale
    const end = x + Math.max(width, spanTargetPx)
    const row = freeFrom.findIndex((free) => free <= x)
    if (row >= 0) {
      freeFrom[row] = end
      placed.push({ kind: 'span', item, row, x, width })
    } else if (crowd && x < crowd.x + crowd.width) {
      crowd.items.push(item)
    } else {
      crowd = { kind: 'crowd', items: [item], row: rows, x, width: spanTargetPx * 1.5 }
      placed.push(crowd)
    }
  }
  return placed
}

export const rowsUsed = (placed: readonly { row: number }[]): number =>
  placed.reduce((most, { row }) => Math.max(most, row + 1), 0)

/** The span that a crowd's members cover together. */
export const crowdSpan = <T extends { span: Span }>(items: readonly T[]): Span => ({
  startSec: Math.min(...items.map(({ span }) => span.startSec)),
  endSec: Math.max(...items.map(({ span }) => span.endSec))
})
