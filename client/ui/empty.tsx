import type { ReactNode } from 'react'

export interface EmptyProps {
  /** What belongs here: "Comments on this take stand here." */
  says: ReactNode
  /** How it comes about, in a sentence. */
  how?: ReactNode
  /** The one action that fills the place. */
  action?: ReactNode
}

/** An empty stave with words: what belongs in this place and the one action that fills it. */
export function Empty({ says, how, action }: EmptyProps) {
  return (
    <div className="grid justify-items-start gap-3 py-4">
      <svg width="96" height="25" viewBox="0 0 96 25" aria-hidden="true" className="text-rule">
        <path d="M0 .5h96M0 6.5h96M0 12.5h96M0 18.5h96M0 24.5h96M.5 0v25M95.5 0v25" stroke="currentColor" fill="none" />
      </svg>
      <p className="max-w-prose">{says}</p>
      {how ? <p className="max-w-prose text-sm text-pencil">{how}</p> : null}
      {action}
    </div>
  )
}
