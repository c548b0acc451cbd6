import type { RefObject } from 'react'
import { useScope } from '@client/lib/scope'

/** While the page itself scrolls, what gets the focus is scrolled clear of the transport that stands over its foot (WCAG 2.4.11). */
export const useStickyFoot = (foot: RefObject<HTMLElement | null>, isPageScrolling: boolean): void => {
  useScope(
    (scope) => {
      const element = foot.current
      if (!element || !isPageScrolling) return
      const root = document.documentElement
      const measure = () => {
        root.style.scrollPaddingBottom = `${element.offsetHeight + 8}px`
      }
      measure()
      scope.observe(new ResizeObserver(measure), element)
      scope.add(() => {
        root.style.scrollPaddingBottom = ''
      })
    },
    [foot, isPageScrolling]
  )
}
