import type { ComponentProps, ReactNode } from 'react'

/** One thing of the transport: what it is called, small, over how it is set. */
export const Part = ({ label, children }: { label: string; children: ReactNode }) => (
  <div role="group" aria-label={label} className="grid min-w-0 content-start">
    <span aria-hidden="true" className="text-xs text-pencil">
      {label}
    </span>
    <div className="flex min-h-7 min-w-0 flex-wrap items-center gap-x-2 gap-y-1">{children}</div>
  </div>
)

/** Words that can be other words: dotted, as everything that is edited where it stands. */
export const WordsButton = (props: Omit<ComponentProps<'button'>, 'className' | 'type'>) => (
  <button
    {...props}
    type="button"
    className="dotted-edit min-h-6 max-w-full min-w-6 text-left text-ink hover:bg-wash disabled:border-transparent disabled:text-pencil aria-expanded:bg-wash"
  />
)

/** A word that does something at once. */
export const ActButton = (props: Omit<ComponentProps<'button'>, 'className' | 'type'>) => (
  <button
    {...props}
    type="button"
    className="-mx-1 min-h-7 rounded px-1 text-left text-ink underline decoration-pencil decoration-1 underline-offset-4 not-disabled:hover:bg-wash disabled:text-pencil disabled:no-underline"
  />
)
