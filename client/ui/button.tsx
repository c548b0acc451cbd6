import type { ComponentProps, ReactNode } from 'react'
import { cx } from './classes'
import { Icon } from './icon'
import type { IconName } from './icon'

export type ButtonLook = 'primary' | 'plain' | 'quiet'

const base =
  'inline-flex min-h-9 items-center justify-center gap-2 rounded px-3 text-sm font-semibold select-none ' +
  'aria-disabled:cursor-default aria-disabled:opacity-60 disabled:cursor-default disabled:opacity-60'

const looks: Record<ButtonLook, string> = {
  primary: 'border border-brass bg-brass text-sheet not-disabled:hover:border-ink',
  plain: 'border border-ink bg-transparent text-ink not-disabled:hover:bg-wash',
  quiet: 'border border-transparent bg-transparent text-ink not-disabled:hover:bg-wash'
}

/** The look of a button for what is really a link. */
export const buttonClass = (look: ButtonLook = 'plain'): string => cx(base, looks[look], 'no-underline')

export interface ButtonProps extends Omit<ComponentProps<'button'>, 'className'> {
  /** `primary` is the brass one: a screen has at most one. */
  look?: ButtonLook
  icon?: IconName
  /** Keeps the button in the tab order, says it is at work and swallows clicks. */
  busy?: boolean
  children: ReactNode
}

export function Button({
  look = 'plain',
  icon,
  busy = false,
  type = 'button',
  onClick,
  children,
  ...rest
}: ButtonProps) {
  return (
    <button
      {...rest}
      type={type}
      className={cx(base, looks[look])}
      aria-disabled={busy || undefined}
      aria-busy={busy || undefined}
      onClick={(event) => {
        if (busy) event.preventDefault()
        else onClick?.(event)
      }}
    >
      {icon ? <Icon name={icon} size={18} /> : null}
      {children}
    </button>
  )
}
