import type { ReactNode } from 'react'
import { Initials } from '@client/ui/initials'
import { RelativeTime } from '@client/ui/relative-time'
import type { Sending } from './changes'

export interface SaidByProps {
  author: { id: string; name: string }
  /** How the author is called here. */
  called: string
  at: string
  sending?: Sending
  /** Between name and time: the kind, who settled it. */
  words?: readonly string[]
  children?: ReactNode
}

/** Who said it, as what, when; what can be done with it stands behind. */
export function SaidBy({ author, called, at, sending, words = [], children }: SaidByProps) {
  return (
    <div className="mt-1.5 flex items-start gap-2.5 text-sm text-pencil">
      <Initials id={author.id} name={author.name} decorative />
      <p className="flex min-w-0 flex-wrap items-center gap-x-1.5 pt-0.5">
        <span>{[called, ...words].join(' · ')}</span>
        <span aria-hidden="true">·</span>
        {sending && !sending.refused ? <span>sending …</span> : <RelativeTime at={at} notFocusable />}
        {children ? <span className="ml-1 inline-flex gap-x-1">{children}</span> : null}
      </p>
    </div>
  )
}
