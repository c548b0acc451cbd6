import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  beatPxPerSec,
  contentPx,
  extendSpan,
  followScroll,
  labelStep,
  maxScroll,
  nextZoom,
  orderedSpan,
  scaleOf,
  scrollIntoView,
  secToX,
  visibleSpan,
  wholePxPerSec,
  withScroll,
  xToSec,
  zoomAround,
  zoomLevels,
  zoomToSpan,
  type View
} from '@client/timeline/geometry'

const views = fc
  .record({
    durationSec: fc.double({ min: 0.5, max: 7200, noNaN: true }),
    widthPx: fc.integer({ min: 100, max: 4000 }),
    zoom: fc.double({ min: 0, max: 1, noNaN: true }),
    scroll: fc.double({ min: 0, max: 1, noNaN: true })
  })
  .map(({ durationSec, widthPx, zoom, scroll }): View => {
    const flat = { durationSec, widthPx, pxPerSec: 0, scrollPx: 0 }
    const pxPerSec = wholePxPerSec(flat) + zoom * (beatPxPerSec(flat) - wholePxPerSec(flat))
    const view = { ...flat, pxPerSec }
    return withScroll(view, scroll * maxScroll(view))
  })

describe('secToX and xToSec', () => {
  it('undo each other inside the take', () => {
    fc.assert(
      fc.property(views, fc.double({ min: 0, max: 1, noNaN: true }), (view, share) => {
        const sec = share * view.durationSec
        expect(xToSec(view, secToX(view, sec))).toBeCloseTo(sec, 6)
      })
    )
  })

  it('put the ends of the take on the ends of the content', () => {
    fc.assert(
      fc.property(views, (view) => {
        expect(secToX(view, 0)).toBeCloseTo(-view.scrollPx, 6)
        expect(secToX(view, view.durationSec)).toBeCloseTo(contentPx(view) - view.scrollPx, 3)
      })
    )
  })

  it('never leave the take, however far outside the pixel is', () => {
    fc.assert(
      fc.property(views, fc.double({ min: -1e9, max: 1e9, noNaN: true }), (view, x) => {
        const sec = xToSec(view, x)
        expect(sec).toBeGreaterThanOrEqual(0)
        expect(sec).toBeLessThanOrEqual(view.durationSec)
      })
    )
  })

  it('give no NaN for an empty take', () => {
    const view = { durationSec: 0, widthPx: 300, pxPerSec: 0, scrollPx: 0 }
    expect([secToX(view, 1), xToSec(view, 10), scaleOf(view), zoomLevels(view).length]).toEqual([0, 0, 0, 0])
  })
})

describe('zoom', () => {
  it('reaches from the whole take to a single beat', () => {
    const view = { durationSec: 120, widthPx: 960, pxPerSec: 0, scrollPx: 0 }
    const levels = zoomLevels(view, 0.6)
    expect(levels[0]).toBe(8)
    expect(levels.at(-1)).toBe(1600)
    expect(visibleSpan({ ...view, pxPerSec: 1600 })).toEqual({ startSec: 0, endSec: 0.6 })
  })

  it('rises through the levels and comes back down the same way', () => {
    fc.assert(
      fc.property(views, (view) => {
        const levels = zoomLevels(view)
        expect(levels).toEqual([...levels].sort((a, b) => a - b))
        let here: View = { ...view, pxPerSec: 0, scrollPx: 0 }
        for (let step = 0; step < levels.length + 2; step += 1) here = zoomAround(here, nextZoom(here, 1), 0)
        expect(scaleOf(here) / (levels.at(-1) ?? 0)).toBeCloseTo(1, 1)
        for (let step = 0; step < levels.length + 2; step += 1) here = zoomAround(here, nextZoom(here, -1), 0)
        expect(contentPx(here)).toBe(view.widthPx)
      })
    )
  })

  it('keeps the moment under the pointer there, unless an end of the take forbids it', () => {
    fc.assert(
      fc.property(
        views,
        fc.double({ min: 0, max: 1, noNaN: true }),
        fc.double({ min: 0.3, max: 3, noNaN: true }),
        (view, share, by) => {
          const x = share * view.widthPx
          const sec = xToSec(view, x)
          const zoomed = zoomAround(view, scaleOf(view) * by, x)
          const isFree = zoomed.scrollPx > 0 && zoomed.scrollPx < maxScroll(zoomed)
          if (isFree) expect(Math.abs(secToX(zoomed, sec) - x)).toBeLessThan(1e-3)
          expect(zoomed.scrollPx).toBeGreaterThanOrEqual(0)
          expect(zoomed.scrollPx).toBeLessThanOrEqual(maxScroll(zoomed))
        }
      )
    )
  })

  it('never makes content wider than browsers can lay out', () => {
    const view = { durationSec: 7200, widthPx: 1200, pxPerSec: 0, scrollPx: 0 }
    expect(contentPx(zoomAround(view, 1e9, 0, 0.3))).toBeLessThanOrEqual(16_000_000)
  })

  it('shows a whole span with air on both sides', () => {
    const view = { durationSec: 120, widthPx: 900, pxPerSec: 0, scrollPx: 0 }
    const shown = visibleSpan(zoomToSpan(view, { startSec: 40, endSec: 48 }))
    expect(shown.startSec).toBeLessThan(40)
    expect(shown.endSec).toBeGreaterThan(48)
    expect(shown.endSec - shown.startSec).toBeCloseTo(8 / 0.9, 1)
  })
})

describe('following', () => {
  const view = withScroll({ durationSec: 100, widthPx: 500, pxPerSec: 50, scrollPx: 0 }, 1000)

  it('rests while the line is in view and turns the page near the right edge', () => {
    expect(followScroll(view, 20.1)).toBeNull()
    expect(followScroll(view, 29.1)).toBeNull()
    expect(followScroll(view, 29.3)).toBeCloseTo(29.3 * 50 - 40)
  })

  it('turns back when a loop jumps to the left of the view', () => {
    expect(followScroll(view, 4)).toBeCloseTo(160)
  })

  it('asks for no turn it cannot make at the end of the take', () => {
    const atEnd = withScroll(view, 1e9)
    expect(followScroll(atEnd, 99.9)).toBeNull()
  })

  it('scrolls no more than needed to bring a moment into view', () => {
    expect(scrollIntoView(view, 25)).toBe(view)
    expect(secToX(scrollIntoView(view, 31), 31)).toBeCloseTo(452)
    expect(secToX(scrollIntoView(view, 10), 10)).toBeCloseTo(48)
  })
})

describe('labelStep', () => {
  it('labels every bar when there is room and fewer by powers of two when not', () => {
    expect([labelStep(80, 30), labelStep(29, 30), labelStep(4, 30), labelStep(0, 30)]).toEqual([1, 2, 8, 1])
  })
})

describe('orderedSpan', () => {
  it('takes the two ends in either order', () => {
    expect(orderedSpan(5, 2)).toEqual({ startSec: 2, endSec: 5 })
  })
})

describe('extendSpan', () => {
  it('starts where the line is, then moves the edge under the line, through the other edge too', () => {
    const first = extendSpan(null, 4, 6)
    expect(first).toEqual({ startSec: 4, endSec: 6 })
    expect(extendSpan(first, 6, 8)).toEqual({ startSec: 4, endSec: 8 })
    expect(extendSpan(first, 4, 2)).toEqual({ startSec: 2, endSec: 6 })
    expect(extendSpan(first, 6, 1)).toEqual({ startSec: 1, endSec: 4 })
    expect(extendSpan(first, 20, 21)).toEqual({ startSec: 20, endSec: 21 })
  })
})
