import type { ComponentProps } from 'react'

export const quietClass =
  'inline-flex min-h-8 items-center rounded px-2 text-sm text-ink no-underline hover:bg-wash aria-pressed:bg-wash aria-expanded:bg-wash'

/** A word in the desk's own rows: as light as the words beside it. */
export const QuietButton = ({ type = 'button', ...rest }: Omit<ComponentProps<'button'>, 'className'>) => (
  <button {...rest} type={type} className={quietClass} />
)
