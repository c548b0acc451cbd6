// The view (zoom and scroll) lives outside React: scrolling and playing move pixels, not components.
import { useMemo, useSyncExternalStore } from 'react'
import { clamp, contentPx, maxScroll, withScroll, type View } from './geometry'

export interface ViewStore {
  get(): View
  set(next: View): void
  subscribe(listener: () => void): () => void
}

export const createViewStore = (durationSec: number): ViewStore => {
  let view: View = { durationSec, widthPx: 0, pxPerSec: 0, scrollPx: 0 }
  const listeners = new Set<() => void>()
  return {
    get: () => view,
    set: (next) => {
      const kept = withScroll(next, next.scrollPx)
      if (same(kept, view)) return
      view = kept
      for (const listener of listeners) listener()
    },
    subscribe: (listener) => {
      listeners.add(listener)
      return () => listeners.delete(listener)
    }
  }
}

const same = (a: View, b: View): boolean =>
  a.durationSec === b.durationSec && a.widthPx === b.widthPx && a.pxPerSec === b.pxPerSec && a.scrollPx === b.scrollPx

/**
 * The view, but with the scroll rounded to a quarter of a view: components re-render when the window they draw (the view
 * and half of one more on each side) has to change, not on every scrolled pixel.
 */
export const useWindowView = (store: ViewStore): View => {
  const key = useSyncExternalStore(store.subscribe, () => windowKey(store.get()))
  return useMemo(() => fromKey(key), [key])
}

const windowKey = (view: View): string => {
  const step = Math.max(1, Math.round(view.widthPx / 4))
  const scroll = clamp(Math.round(view.scrollPx / step) * step, 0, maxScroll(view))
  return `${view.durationSec}|${view.widthPx}|${view.pxPerSec}|${scroll}`
}

const fromKey = (key: string): View => {
  const [durationSec = 0, widthPx = 0, pxPerSec = 0, scrollPx = 0] = key.split('|').map(Number)
  return { durationSec, widthPx, pxPerSec, scrollPx }
}

/** The same while scrolling: width of the drawn content. */
export const useContentPx = (store: ViewStore): number =>
  useSyncExternalStore(store.subscribe, () => contentPx(store.get()))
