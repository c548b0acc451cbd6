import { useRef, type ReactNode } from 'react'
import { useScope } from '@client/lib/scope'
import type { ViewStore } from './view-store'

/** What lies at its place in the take and moves with the view's scroll: children stand at pixels from the take's start. */
export function Moving({ store, children }: { store: ViewStore; children: ReactNode }) {
  const box = useRef<HTMLDivElement>(null)
  useScope(
    (scope) => {
      const place = () => {
        if (box.current) box.current.style.transform = `translateX(${-store.get().scrollPx}px)`
      }
      place()
      scope.add(store.subscribe(place))
    },
    [store]
  )
  return (
    <div ref={box} className="pointer-events-none absolute inset-y-0 left-0 w-0">
      {children}
    </div>
  )
}
