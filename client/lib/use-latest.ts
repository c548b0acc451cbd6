import { useLayoutEffect, useRef, type RefObject } from 'react'

/** The newest value, for listeners and frames that outlive the render they were made in. */
export function useLatest<T>(value: T): Readonly<RefObject<T>> {
  const ref = useRef(value)
  useLayoutEffect(() => {
    ref.current = value
  })
  return ref
}
