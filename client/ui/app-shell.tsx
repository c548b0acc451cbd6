import type { ReactNode } from 'react'
import { Link } from 'react-router-dom'
import { cx } from './classes'
import { Icon } from './icon'
import { PlumbMark } from './plumb-mark'
import { SkipLink } from './skip-link'

export interface Crumb {
  label: string
  /** Left out for the page one is on. */
  to?: string
}

export interface AppShellProps {
  /** From the group down to where one is; the last is the page itself. On a phone: the last, and an arrow to the one before. */
  crumbs?: readonly Crumb[]
  /** Who is here, the session, the account: at the right of the bar. */
  right?: ReactNode
  /** The page takes exactly the window's height and its parts scroll (the desk on a wide screen). */
  fill?: boolean
  children: ReactNode
}

export function AppShell({ crumbs = [], right, fill = false, children }: AppShellProps) {
  const above = crumbs.slice(0, -1).findLast(({ to }) => to)
  return (
    <div className={cx('flex min-h-dvh flex-col', fill && 'lg:h-dvh lg:min-h-0')}>
      <SkipLink to="main" />
      <header className="flex min-h-13 flex-none flex-wrap items-center gap-x-4 gap-y-1 px-3 py-2 sm:px-5">
        <Link to="/" className="flex min-h-9 min-w-6 items-center gap-4 pl-0.5 font-semibold text-ink no-underline">
          <PlumbMark />
          <span className={cx(crumbs.length > 0 && 'sr-only sm:not-sr-only')}>Plumbline</span>
        </Link>
        {crumbs.length > 0 ? (
          <nav aria-label="Where you are" className="min-w-0 flex-[1_1_9rem]">
            <ol className="flex min-w-0 items-center gap-x-2">
              {above?.to ? (
                <li className="sm:hidden">
                  <Link
                    to={above.to}
                    aria-label={`Up to ${above.label}`}
                    className="flex h-9 w-7 items-center justify-center text-ink"
                  >
                    <Icon name="arrowLeft" size={18} />
                  </Link>
                </li>
              ) : null}
              {crumbs.map((crumb, index) => (
                <CrumbItem key={`${index}-${crumb.label}`} crumb={crumb} isLast={index === crumbs.length - 1} />
              ))}
            </ol>
          </nav>
        ) : (
          <span className="flex-1" />
        )}
        {right ? (
          <div className="ml-auto flex min-w-0 flex-wrap items-center justify-end gap-x-4 gap-y-1">{right}</div>
        ) : null}
      </header>
      <main id="main" tabIndex={-1} className={cx('flex min-w-0 flex-1 flex-col outline-none', fill && 'min-h-0')}>
        {children}
      </main>
    </div>
  )
}

function CrumbItem({ crumb, isLast }: { crumb: Crumb; isLast: boolean }) {
  return (
    <li className={cx('min-w-0 items-center gap-x-2', isLast ? 'flex flex-initial' : 'hidden flex-none sm:flex')}>
      {crumb.to && !isLast ? (
        <Link to={crumb.to} className="truncate py-1 text-pencil no-underline hover:text-ink hover:underline">
          {crumb.label}
        </Link>
      ) : (
        <span
          aria-current={isLast ? 'page' : undefined}
          className={cx('truncate', isLast ? 'text-ink' : 'text-pencil')}
        >
          {crumb.label}
        </span>
      )}
      {isLast ? null : (
        <span aria-hidden="true" className="text-pencil">
          /
        </span>
      )}
    </li>
  )
}
