import { useId } from 'react'
import type { ReactNode } from 'react'
import { cx } from './classes'

export interface PageProps {
  title: string
  /** One sentence under the title. */
  lead?: ReactNode
  /** Beside the title: at most one brass button among them. */
  actions?: ReactNode
  /** `narrow` for forms, `wide` for tables. */
  width?: 'narrow' | 'text' | 'wide'
  children: ReactNode
}

const widths = { narrow: 'max-w-md', text: 'max-w-3xl', wide: 'max-w-6xl' }

/** An ordinary page: title, lead, sections. */
export function Page({ title, lead, actions, width = 'text', children }: PageProps) {
  return (
    <div className={cx('mx-auto grid w-full gap-6 px-3 pt-4 pb-12 sm:px-5', widths[width])}>
      <title>{`${title} · Plumbline`}</title>
      <header className="flex flex-wrap items-end justify-between gap-x-6 gap-y-3">
        <div className="min-w-0">
          <h1 className="text-xl font-semibold break-words">{title}</h1>
          {lead ? <p className="mt-1 max-w-prose text-pencil">{lead}</p> : null}
        </div>
        {actions ? <div className="flex flex-wrap gap-3">{actions}</div> : null}
      </header>
      {children}
    </div>
  )
}

export interface PageSectionProps {
  title: ReactNode
  /** At the right of the title. */
  aside?: ReactNode
  children: ReactNode
}

export function PageSection({ title, aside, children }: PageSectionProps) {
  const id = useId()
  return (
    <section aria-labelledby={id} className="grid min-w-0 gap-3">
      <header className="flex flex-wrap items-baseline justify-between gap-x-4 border-b border-rule pb-1">
        <h2 id={id} className="text-base font-semibold">
          {title}
        </h2>
        {aside}
      </header>
      {children}
    </section>
  )
}
