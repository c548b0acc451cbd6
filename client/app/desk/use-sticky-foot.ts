import type { RefObject } from 'react'
import { useScope } from '@client/lib/scope'

/**
 * Keeps things clear of the transport at the foot: toasts always (`--foot`), and while the page itself scrolls what gets the
 * focus (WCAG 2.4.11).
 */
export const useStickyFoot = (foot: RefObject<HTMLElement | null>, isPageScrolling: boolean): void => {
  useScope(
    (scope) => {
      const element = foot.current
      if (!element) return
      const { style } = document.documentElement
      const measure = () => {
        style.setProperty('--foot', `${element.offsetHeight}px`)
        style.scrollPaddingBottom = isPageScrolling ? `${element.offsetHeight + 8}px` : ''
      }
      measure()
      scope.observe(new ResizeObserver(measure), element)
      scope.add(() => {
        style.removeProperty('--foot')
        style.scrollPaddingBottom = ''
      })
    },
    [foot, isPageScrolling]
  )
}
