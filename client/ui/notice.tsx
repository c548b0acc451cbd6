import type { ReactNode } from 'react'
import { cx } from './classes'
import { Icon } from './icon'

export interface NoticeProps {
  /** `status` says how things are; `fault` what went wrong. Both say what to do next. */
  kind?: 'status' | 'fault'
  title?: ReactNode
  /** What happened, then what to do about it. */
  children: ReactNode
  /** The one thing to do next: a button or a link. */
  next?: ReactNode
}

export function Notice({ kind = 'status', title, children, next }: NoticeProps) {
  const isFault = kind === 'fault'
  return (
    <div
      role={isFault ? 'alert' : 'status'}
      className={cx('flex gap-3 border-l-[3px] bg-sheet px-4 py-3', isFault ? 'border-fault' : 'border-pencil')}
    >
      {isFault ? (
        <span className="mt-px text-fault">
          <Icon name="warning" />
        </span>
      ) : null}
      <div className="grid min-w-0 content-start gap-1">
        {title ? <p className={cx('font-semibold', isFault && 'text-fault')}>{title}</p> : null}
        <div className="break-words">{children}</div>
        {next ? <div className="mt-2 flex flex-wrap gap-2">{next}</div> : null}
      </div>
    </div>
  )
}
