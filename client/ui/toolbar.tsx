import { useRef } from 'react'
import type { ReactNode } from 'react'
import { useScope } from '@client/lib/scope'

export interface ToolbarProps {
  label: string
  children: ReactNode
}

const stops = 'button:not([disabled]), a[href], input:not([disabled]), select:not([disabled])'

// Controls that need the arrows for themselves: left and right stay theirs, and Tab reaches them as well.
const ownsArrows = (element: Element) =>
  (element instanceof HTMLInputElement && !['checkbox', 'button'].includes(element.type)) ||
  element instanceof HTMLSelectElement

/** APG toolbar: one tab stop that remembers its place, arrows move between controls. */
export function Toolbar({ label, children }: ToolbarProps) {
  const bar = useRef<HTMLDivElement>(null)

  useScope((scope) => {
    const element = bar.current
    if (!element) return
    // What stands in a box that a control opened has its own order.
    const controls = () =>
      [...element.querySelectorAll<HTMLElement>(stops)].filter((control) => !control.closest('[popover]'))

    const settle = (current?: Element | null) => {
      const all = controls()
      const kept = all.find((control) => control === current) ?? all.find((c) => c.tabIndex === 0 && !ownsArrows(c))
      const stop = kept ?? all[0]
      for (const control of all) {
        const wanted = control === stop || ownsArrows(control) ? 0 : -1
        if (control.tabIndex !== wanted) control.tabIndex = wanted
      }
    }

    settle()
    // Buttons that come, go or get disabled must not take the only tab stop with them.
    const observer = new MutationObserver(() => settle(document.activeElement))
    scope.observe(observer, element, {
      childList: true,
      subtree: true,
      attributes: true,
      attributeFilter: ['disabled', 'href']
    })
    scope.listen(element, 'focusin', ({ target }) => {
      if (target instanceof Element && !ownsArrows(target) && !target.closest('[popover]')) settle(target)
    })
    scope.listen(element, 'keydown', (event) => {
      // Those that own the arrows are passed over: they would not let go of them.
      const all = controls().filter((control) => !ownsArrows(control))
      const at = all.indexOf(document.activeElement as HTMLElement)
      if (at < 0 || event.defaultPrevented) return
      const targets: Record<string, number> = {
        ArrowRight: (at + 1) % all.length,
        ArrowLeft: (at - 1 + all.length) % all.length,
        Home: 0,
        End: all.length - 1
      }
      const next = all[targets[event.key] ?? -1]
      if (!next) return
      event.preventDefault()
      event.stopPropagation()
      next.focus()
    })
  }, [])

  return (
    <div ref={bar} role="toolbar" aria-label={label} className="flex min-w-0 flex-wrap items-center gap-1">
      {children}
    </div>
  )
}
