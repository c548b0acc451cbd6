import type { ReactNode } from 'react'

/** First tab stop of a page; visible only while it has the focus. */
export function SkipLink({ to, children = 'Skip to the main part' }: { to: string; children?: ReactNode }) {
  return (
    <a
      href={`#${to}`}
      className="sr-only rounded bg-ink font-semibold text-sheet no-underline focus:not-sr-only focus:absolute focus:top-2 focus:left-2 focus:z-50 focus:px-4 focus:py-2"
    >
      {children}
    </a>
  )
}
