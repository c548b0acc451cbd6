import { useRef, type PointerEvent } from 'react'
import { useScope } from '@client/lib/scope'
import { clamp, contentPx, withScroll } from './geometry'
import type { ViewStore } from './view-store'

/** What part of the take is in view; dragged or pressed to move the paper. Keys move the line, which brings the view along. */
export function ViewBar({ store }: { store: ViewStore }) {
  const thumb = useRef<HTMLSpanElement>(null)
  const grip = useRef<number | null>(null)
  useScope(
    (scope) => {
      const place = () => {
        const view = store.get()
        if (!thumb.current) return
        const share = view.widthPx / Math.max(1, contentPx(view))
        const rail = thumb.current.parentElement
        if (rail) rail.style.visibility = share >= 0.999 ? 'hidden' : ''
        thumb.current.style.width = `${Math.max(24, share * view.widthPx)}px`
        thumb.current.style.transform = `translateX(${(view.scrollPx / Math.max(1, contentPx(view))) * view.widthPx}px)`
      }
      place()
      scope.add(store.subscribe(place))
    },
    [store]
  )
  const scrollTo = (event: PointerEvent<HTMLElement>, gripPx: number) => {
    const view = store.get()
    const x = event.clientX - event.currentTarget.getBoundingClientRect().left - gripPx
    store.set(withScroll(view, (x / Math.max(1, view.widthPx)) * contentPx(view)))
  }
  const handleDown = (event: PointerEvent<HTMLElement>) => {
    event.currentTarget.setPointerCapture(event.pointerId)
    const view = store.get()
    const x = event.clientX - event.currentTarget.getBoundingClientRect().left
    const thumbPx = (view.widthPx / contentPx(view)) * view.widthPx
    const left = (view.scrollPx / contentPx(view)) * view.widthPx
    const isOnThumb = x >= left && x <= left + thumbPx
    grip.current = isOnThumb ? x - left : clamp(thumbPx / 2, 0, view.widthPx)
    if (!isOnThumb) scrollTo(event, grip.current)
  }
  return (
    <div
      aria-hidden="true"
      className="relative h-6 touch-none"
      onPointerDown={handleDown}
      onPointerMove={(event) => {
        if (grip.current !== null) scrollTo(event, grip.current)
      }}
      onPointerUp={() => {
        grip.current = null
      }}
      onPointerCancel={() => {
        grip.current = null
      }}
    >
      <span className="absolute inset-x-0 top-[11px] h-0.5 bg-rule" />
      <span ref={thumb} className="absolute top-2.5 left-0 h-1 bg-pencil" />
    </div>
  )
}
