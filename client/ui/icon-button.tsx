import type { ComponentProps } from 'react'
import { cx } from './classes'
import { Icon } from './icon'
import type { IconName } from './icon'

export interface IconButtonProps extends Omit<ComponentProps<'button'>, 'className' | 'children' | 'aria-label'> {
  icon: IconName
  /** What it does, in words: the name for assistive technology and the tip on hover. */
  label: string
  /** `round` is the brass play button: it counts as the screen's one primary action. */
  look?: 'plain' | 'quiet' | 'round'
  /** Key that does the same, shown in the tip. */
  keys?: string
}

const looks = {
  plain: 'h-9 w-9 rounded border border-ink text-ink not-disabled:hover:bg-wash',
  quiet: 'h-9 w-9 rounded border border-transparent text-ink not-disabled:hover:bg-wash',
  round: 'h-11 w-11 rounded-full border border-brass bg-brass text-sheet not-disabled:hover:border-ink'
}

export function IconButton({ icon, label, look = 'quiet', keys, type = 'button', ...rest }: IconButtonProps) {
  return (
    <button
      {...rest}
      type={type}
      aria-label={label}
      aria-keyshortcuts={keys}
      title={keys ? `${label} (${keys})` : label}
      className={cx(
        'inline-flex flex-none items-center justify-center disabled:cursor-default disabled:opacity-50 aria-pressed:bg-wash',
        'aria-pressed:border-ink',
        looks[look]
      )}
    >
      <Icon name={icon} size={look === 'round' ? 22 : 20} />
    </button>
  )
}
