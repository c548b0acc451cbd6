import { useRef } from 'react'
import type { KeyboardEvent, ReactNode } from 'react'
import { Button } from './button'
import { cx } from './classes'
import { Icon } from './icon'
import type { IconName } from './icon'
import { IconButton } from './icon-button'
import { Popover } from './popover'

export interface MenuItem {
  key: string
  label: string
  icon?: IconName
  /** Cannot be taken back: stands apart and in the colour of faults. */
  grave?: boolean
  disabled?: boolean
  onChoose: () => void
}

export interface MenuProps {
  /** Name of the button. */
  label: string
  items: readonly MenuItem[]
  /** Icon only; without it the label stands on the button. */
  icon?: IconName
  /** Stands on the button in place of the label, which then only names it. */
  face?: ReactNode
  align?: 'start' | 'end'
}

const itemsIn = (menu: HTMLElement) => [...menu.querySelectorAll<HTMLElement>('[role="menuitem"]')]

/** APG menu button: arrows, Home, End and first letters move; Enter or Space chooses; Esc goes back to the button. */
export function Menu({ label, items, icon, face, align = 'end' }: MenuProps) {
  const startAt = useRef<'first' | 'last'>('first')

  function handleMenuKey(event: KeyboardEvent<HTMLElement>, menu: HTMLElement) {
    const all = itemsIn(menu)
    const at = all.indexOf(document.activeElement as HTMLElement)
    const letter = event.key.length === 1 && event.key !== ' ' ? event.key.toLowerCase() : null
    const byLetter = letter
      ? [...all.slice(at + 1), ...all.slice(0, at + 1)].find((item) =>
          item.textContent.toLowerCase().startsWith(letter)
        )
      : undefined
    const targets: Record<string, HTMLElement | undefined> = {
      ArrowDown: all[(at + 1) % all.length],
      ArrowUp: all[(at - 1 + all.length) % all.length],
      Home: all[0],
      End: all.at(-1)
    }
    const next = targets[event.key] ?? byLetter
    if (!next) return
    event.preventDefault()
    event.stopPropagation()
    next.focus()
  }

  return (
    <Popover
      role="menu"
      label={label}
      align={align}
      onOpened={(box) =>
        itemsIn(box)
          .at(startAt.current === 'first' ? 0 : -1)
          ?.focus()
      }
      renderTrigger={(props) => {
        const shared = {
          ...props,
          'aria-haspopup': 'menu' as const,
          onClick: () => {
            startAt.current = 'first'
            props.onClick()
          },
          onKeyDown: (event: KeyboardEvent) => {
            if ((event.key !== 'ArrowDown' && event.key !== 'ArrowUp') || props['aria-expanded']) return
            event.preventDefault()
            startAt.current = event.key === 'ArrowUp' ? 'last' : 'first'
            props.onClick()
          }
        }
        if (icon) return <IconButton {...shared} icon={icon} label={label} />
        return face ? (
          <Button {...shared} look="quiet" aria-label={label} title={label}>
            {face}
            <Icon name="chevronDown" size={16} />
          </Button>
        ) : (
          <Button {...shared}>
            {label}
            <Icon name="chevronDown" size={16} />
          </Button>
        )
      }}
    >
      {(close) =>
        items.map((item) => (
          <button
            key={item.key}
            type="button"
            role="menuitem"
            tabIndex={-1}
            aria-disabled={item.disabled || undefined}
            onKeyDown={(event) => {
              const menu = event.currentTarget.closest<HTMLElement>('[role="menu"]')
              if (menu) handleMenuKey(event, menu)
            }}
            onClick={() => {
              if (item.disabled) return
              close()
              item.onChoose()
            }}
            className={cx(
              'flex min-h-9 w-full items-center gap-2.5 px-3 text-left text-sm -outline-offset-2 hover:bg-wash focus:bg-wash',
              'aria-disabled:cursor-default aria-disabled:text-pencil',
              item.grave && 'text-fault'
            )}
          >
            {item.icon ? <Icon name={item.icon} size={18} /> : null}
            {item.label}
          </button>
        ))
      }
    </Popover>
  )
}
