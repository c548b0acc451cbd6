// Size, zoom and scroll of the lanes: what resizes, wheels and follows.
import { useEffect, useRef, useState, type RefObject } from 'react'
import { useScope, type Scope } from '@client/lib/scope'
import { useLatest } from '@client/lib/use-latest'
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'
import {
  followScroll,
  nextZoom,
  scaleOf,
  scrollIntoView,
  secToX,
  wholePxPerSec,
  withScroll,
  zoomAround,
  zoomToSpan,
  type View
} from './geometry'
import { createViewStore, type ViewStore } from './view-store'

export interface TimelineView {
  store: ViewStore
  lanes: RefObject<HTMLDivElement | null>
  zoom(direction: 1 | -1, aroundSec?: Sec): void
  zoomWhole(): void
  zoomTo(span: Span): void
  /** Brings a moment into view without zooming. */
  show(sec: Sec): void
  /** Turns the page when the line has come to its end. */
  follow(sec: Sec): void
}

const wheelStep = 0.0025
const pageTurnMs = 220

export const useTimelineView = (durationSec: Sec, beatSec: Sec | undefined): TimelineView => {
  const lanes = useRef<HTMLDivElement>(null)
  const [store] = useState(() => createViewStore(durationSec))
  const latest = useLatest({ beatSec })
  /** Stops the page turn that is running; null while none is. */
  const turn = useRef<(() => void) | null>(null)
  const scope = useRef<Scope | null>(null)

  useEffect(() => {
    store.set({ ...store.get(), durationSec })
  }, [store, durationSec])

  useScope(
    (own) => {
      scope.current = own
      own.add(() => {
        scope.current = null
        turn.current = null
      })
      const element = lanes.current
      if (!element) return
      const measure = () => {
        const view = store.get()
        const isWhole = view.pxPerSec <= wholePxPerSec(view)
        store.set({ ...view, widthPx: element.clientWidth, pxPerSec: isWhole ? 0 : view.pxPerSec })
      }
      measure()
      own.observe(new ResizeObserver(measure), element)
      listenToWheel(own, element, store, () => latest.current.beatSec)
    },
    [store]
  )

  const turnTo = (scrollPx: number) => {
    const view = store.get()
    const from = view.scrollPx
    const isNear = Math.abs(scrollPx - from) < view.widthPx * 1.5
    if (!isNear || !scope.current || matchMedia('(prefers-reduced-motion: reduce)').matches) {
      store.set(withScroll(view, scrollPx))
      return
    }
    let startMs: number | null = null
    const stop = scope.current.eachFrame((nowMs) => {
      startMs ??= nowMs
      const share = Math.min(1, (nowMs - startMs) / pageTurnMs)
      store.set(withScroll(store.get(), from + (scrollPx - from) * (1 - (1 - share) ** 3)))
      if (share < 1) return
      stop()
      turn.current = null
    })
    turn.current = stop
  }

  return {
    store,
    lanes,
    zoom: (direction, aroundSec) => {
      const view = store.get()
      const x = aroundSec === undefined ? view.widthPx / 2 : secToX(view, aroundSec)
      const anchor = x >= 0 && x <= view.widthPx ? x : view.widthPx / 2
      store.set(zoomAround(view, nextZoom(view, direction, beatSec), anchor, beatSec))
    },
    zoomWhole: () => store.set({ ...store.get(), pxPerSec: 0, scrollPx: 0 }),
    zoomTo: (span) => store.set(zoomToSpan(store.get(), span, beatSec)),
    show: (sec) => store.set(scrollIntoView(store.get(), sec)),
    follow: (sec) => {
      if (turn.current) return
      const target = followScroll(store.get(), sec)
      if (target !== null) turnTo(target)
    }
  }
}

/** Ctrl or Command and the wheel (a pinch on a pad) zooms around the pointer, once a frame; sideways scrolls. */
const listenToWheel = (scope: Scope, element: HTMLElement, store: ViewStore, beatSec: () => Sec | undefined): void => {
  let wanted: { pxPerSec: number; x: number } | null = null
  const zoomNow = () => {
    if (wanted) store.set(zoomAround(store.get(), wanted.pxPerSec, wanted.x, beatSec()))
    wanted = null
  }
  scope.listen(
    element,
    'wheel',
    (event) => {
      const view: View = store.get()
      const lineFactor = event.deltaMode === 1 ? 16 : 1
      if (event.ctrlKey || event.metaKey) {
        event.preventDefault()
        const from = wanted?.pxPerSec ?? scaleOf(view)
        const x = event.clientX - element.getBoundingClientRect().left
        if (!wanted) scope.frame(zoomNow)
        wanted = { pxPerSec: from * Math.exp(-event.deltaY * lineFactor * wheelStep), x }
        return
      }
      const sideways = event.shiftKey && event.deltaX === 0 ? event.deltaY : event.deltaX
      if (sideways === 0) return
      event.preventDefault()
      store.set(withScroll(view, view.scrollPx + sideways * lineFactor))
    },
    { passive: false }
  )
}
