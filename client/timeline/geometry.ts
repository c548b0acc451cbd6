// All arithmetic between seconds of a take and pixels of its view. No canvas, no DOM.
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'

/** What part of a take is looked at. `pxPerSec` is a wish: content never gets narrower than the view. */
export interface View {
  durationSec: Sec
  widthPx: number
  pxPerSec: number
  scrollPx: number
}

/** Browsers stop laying out boxes somewhere above 16.7 million pixels (Firefox 17.9 million, Chromium 33.5 million). */
const maxContentPx = 16_000_000
/** A take without a bar map is zoomed down to this much time in the view. */
const fallbackBeatSec = 0.5

export const contentPx = (view: View): number =>
  Math.max(view.widthPx, Math.min(maxContentPx, Math.ceil(view.durationSec * view.pxPerSec - 1e-6)))

/** Pixels per second really drawn, after the content was stretched to fill the view. */
export const scaleOf = (view: View): number => (view.durationSec > 0 ? contentPx(view) / view.durationSec : 0)

export const secToX = (view: View, sec: Sec): number => sec * scaleOf(view) - view.scrollPx

export const xToSec = (view: View, x: number): Sec => {
  const scale = scaleOf(view)
  if (scale === 0) return 0
  return clamp((x + view.scrollPx) / scale, 0, view.durationSec)
}

export const clamp = (value: number, low: number, high: number): number => Math.min(high, Math.max(low, value))

export const maxScroll = (view: View): number => Math.max(0, contentPx(view) - view.widthPx)

export const withScroll = (view: View, scrollPx: number): View => ({
  ...view,
  scrollPx: clamp(scrollPx, 0, maxScroll(view))
})

/** The whole take just fills the view. */
export const wholePxPerSec = (view: View): number => (view.durationSec > 0 ? view.widthPx / view.durationSec : 0)

/** A single beat just fills the view. */
export const beatPxPerSec = (view: View, beatSec: Sec = fallbackBeatSec): number => {
  const floor = wholePxPerSec(view)
  if (!(beatSec > 0) || !(view.durationSec > 0)) return floor
  return Math.max(floor, Math.min(view.widthPx / beatSec, maxContentPx / view.durationSec))
}

/** Steps of the zoom buttons: from the whole take to one beat, each twice as near as the last. */
export const zoomLevels = (view: View, beatSec?: Sec): number[] => {
  const first = wholePxPerSec(view)
  const last = beatPxPerSec(view, beatSec)
  if (!(first > 0)) return []
  const levels: number[] = []
  for (let level = first; level < last * 0.99; level *= 2) levels.push(level)
  return [...levels, last]
}

/** The next level nearer (`+1`) or farther (`-1`) than the present zoom. */
export const nextZoom = (view: View, direction: 1 | -1, beatSec?: Sec): number => {
  const levels = zoomLevels(view, beatSec)
  const now = scaleOf(view)
  const found = direction > 0 ? levels.find((level) => level > now * 1.01) : levels.findLast((l) => l < now * 0.99)
  return found ?? now
}

/** Zooms so that the moment under `x` stays under `x`, as far as the ends of the take allow. */
export const zoomAround = (view: View, pxPerSec: number, x: number, beatSec?: Sec): View => {
  const sec = xToSec(view, x)
  const zoomed = { ...view, pxPerSec: clamp(pxPerSec, wholePxPerSec(view), beatPxPerSec(view, beatSec)) }
  return withScroll(zoomed, sec * scaleOf(zoomed) - x)
}

/** Brings a span into view with a little air on both sides. */
export const zoomToSpan = (view: View, span: Span, beatSec?: Sec): View => {
  const length = Math.max(span.endSec - span.startSec, 0.05)
  const pxPerSec = clamp((view.widthPx * 0.9) / length, wholePxPerSec(view), beatPxPerSec(view, beatSec))
  const zoomed = { ...view, pxPerSec }
  const middle = (span.startSec + span.endSec) / 2
  return withScroll(zoomed, middle * scaleOf(zoomed) - view.widthPx / 2)
}

/** The part of the take in view, widened by `marginPx` on both sides. */
export const visibleSpan = (view: View, marginPx = 0): Span => ({
  startSec: xToSec(view, -marginPx),
  endSec: xToSec(view, view.widthPx + marginPx)
})

export const overlaps = (a: Span, b: Span): boolean => a.startSec <= b.endSec && b.startSec <= a.endSec

/**
 * Following turns pages as a player does with paper: nothing moves until the line nears the right edge, then the view
 * turns so that a little of what was heard stays at the left. Null while no turn is due.
 */
export const followScroll = (view: View, sec: Sec): number | null => {
  const x = secToX(view, sec)
  if (x >= 0 && x <= view.widthPx * 0.92) return null
  const target = clamp(sec * scaleOf(view) - view.widthPx * 0.08, 0, maxScroll(view))
  return Math.abs(target - view.scrollPx) < 1 ? null : target
}

/** Scrolls no more than needed to have `sec` at least `marginPx` inside the view. */
export const scrollIntoView = (view: View, sec: Sec, marginPx = 48): View => {
  const x = secToX(view, sec)
  if (x < marginPx) return withScroll(view, view.scrollPx + x - marginPx)
  if (x > view.widthPx - marginPx) return withScroll(view, view.scrollPx + x - view.widthPx + marginPx)
  return view
}

/** Every how many bars a label has room: 1, 2, 4, 8 … */
export const labelStep = (barPx: number, neededPx: number): number => {
  if (!(barPx > 0)) return 1
  let step = 1
  while (barPx * step < neededPx && step < 4096) step *= 2
  return step
}

export const orderedSpan = (a: Sec, b: Sec): Span => ({ startSec: Math.min(a, b), endSec: Math.max(a, b) })

/** Same place for a hand: two hundredths of a second. */
const samePlaceSec = 0.02

/** A selection extended from where the line is to where it goes: the edge under the line moves, or a new one starts there. */
export const extendSpan = (span: Span | null, from: Sec, to: Sec): Span => {
  if (span && Math.abs(span.endSec - from) < samePlaceSec) return orderedSpan(span.startSec, to)
  if (span && Math.abs(span.startSec - from) < samePlaceSec) return orderedSpan(span.endSec, to)
  return orderedSpan(from, to)
}
