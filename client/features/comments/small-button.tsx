import type { ComponentProps } from 'react'

/** A word that does something, quiet enough to stand under every comment. */
export const SmallButton = ({ type = 'button', ...rest }: Omit<ComponentProps<'button'>, 'className'>) => (
  <button
    {...rest}
    type={type}
    className="min-h-6 rounded px-1 text-sm text-pencil underline decoration-dotted underline-offset-2 hover:text-ink disabled:opacity-50"
  />
)
