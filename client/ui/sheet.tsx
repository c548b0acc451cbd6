import type { ComponentProps, ReactNode } from 'react'
import { cx } from './classes'

export interface SheetProps extends Omit<ComponentProps<'section'>, 'className' | 'title'> {
  title?: ReactNode
  /** Level of the title in the page's outline. */
  level?: 2 | 3
  /** Stands at the right of the title: a quiet button, a count. */
  aside?: ReactNode
  /** No inner margin: lanes and tables draw to the edge. */
  bare?: boolean
  /** Fills the height it is given and lets its content scroll. */
  fill?: boolean
}

/** A white sheet on the page: the ground of lanes, lists and forms. */
export function Sheet({ title, level = 2, aside, bare = false, fill = false, children, ...rest }: SheetProps) {
  const Heading = `h${level}` as const
  return (
    <section
      {...rest}
      className={cx(
        'min-w-0 border border-rule bg-sheet',
        !bare && 'px-4 py-4 sm:px-5',
        fill && 'flex h-full min-h-0 flex-col'
      )}
    >
      {title ? (
        <header className={cx('flex flex-wrap items-baseline justify-between gap-x-4 gap-y-1', bare ? 'p-4' : 'mb-3')}>
          <Heading className="text-base font-semibold">{title}</Heading>
          {aside}
        </header>
      ) : null}
      {children}
    </section>
  )
}
