import { useId, useRef, useState } from 'react'
import type { ReactNode, RefObject } from 'react'
import { useScope } from '@client/lib/scope'
import { cx } from './classes'
import { placeBeside } from './place-beside'

interface Trigger {
  ref: RefObject<HTMLButtonElement | null>
  onClick: () => void
  'aria-expanded': boolean
  'aria-controls': string | undefined
}

export interface PopoverProps {
  /** The button that opens it: spread the given props on it. */
  renderTrigger: (props: Trigger) => ReactNode
  children: (close: () => void) => ReactNode
  align?: 'start' | 'end'
  role?: 'dialog' | 'menu'
  label: string
  onOpened?: (box: HTMLElement) => void
}

/** A small box beside its button, in the top layer; Esc, a click outside or Tab out of it closes it. */
export function Popover({ renderTrigger, children, align = 'start', role = 'dialog', label, onOpened }: PopoverProps) {
  const id = useId()
  const [isOpen, setOpen] = useState(false)
  const anchor = useRef<HTMLButtonElement>(null)
  const box = useRef<HTMLDivElement>(null)

  const close = () => setOpen(false)

  useScope(
    (scope) => {
      const element = box.current
      const button = anchor.current
      if (!isOpen || !element || !button) return
      element.showPopover()
      scope.add(() => {
        // The box is gone by now; if the focus went with it, it returns to the button.
        if (document.activeElement === document.body && button.isConnected) button.focus()
      })
      const place = () => {
        element.style.maxHeight = ''
        const { width, height } = element.getBoundingClientRect()
        const view = { width: innerWidth, height: innerHeight }
        // A ledge is not covered: what opens from it, and not from a box on it, stands over or under the whole of it.
        const ledge = button.closest('[data-ledge], [popover]')
        const { left, right } = button.getBoundingClientRect()
        const { top, bottom } = (ledge?.matches('[data-ledge]') ? ledge : button).getBoundingClientRect()
        const beside = { left, right, top, bottom }
        const at = placeBeside(beside, { width, height }, view, align)
        element.style.left = `${at.left}px`
        // Over a button at the foot of the window it stands on that button: what comes into it later pushes it upwards.
        const isOnFoot = at.top < beside.top && beside.top > view.height / 2
        element.style.top = isOnFoot ? 'auto' : `${at.top}px`
        element.style.bottom = isOnFoot ? `${view.height - beside.top + 4}px` : 'auto'
        if (isOnFoot) element.style.maxHeight = `${beside.top - 12}px`
      }
      place()
      onOpened?.(element)
      scope.listen(window, 'resize', place)
      const handleScroll = ({ target }: Event) => {
        if (!(target instanceof Node && element.contains(target))) place()
      }
      scope.listen(window, 'scroll', handleScroll, { capture: true, passive: true })
      scope.listen(document, 'pointerdown', ({ target }) => {
        if (target instanceof Node && !element.contains(target) && !button.contains(target)) close()
      })
      scope.listen(document, 'keydown', (event) => {
        // A box opened from within this one goes first.
        if (event.key !== 'Escape' || element.querySelector('[popover]')) return
        event.stopPropagation()
        event.preventDefault()
        close()
      })
      scope.listen(element, 'focusout', ({ relatedTarget }) => {
        if (relatedTarget instanceof Node && !element.contains(relatedTarget) && relatedTarget !== button)
          setOpen(false)
      })
    },
    [isOpen, align]
  )

  return (
    <>
      {renderTrigger({
        ref: anchor,
        onClick: () => setOpen(!isOpen),
        'aria-expanded': isOpen,
        'aria-controls': isOpen ? id : undefined
      })}
      {isOpen ? (
        <div
          ref={box}
          id={id}
          popover="manual"
          role={role}
          aria-label={label}
          className={cx(
            'fixed m-0 max-h-[80dvh] max-w-[calc(100vw-1rem)] min-w-44 overflow-y-auto rounded border border-pencil bg-sheet text-ink',
            role === 'menu' ? 'py-1' : 'p-4'
          )}
        >
          {children(close)}
        </div>
      ) : null}
    </>
  )
}
