import { useId } from 'react'
import type { ReactNode } from 'react'

export interface ProgressProps {
  /** What is being done now: "Listening for beats". */
  stage: string
  /** 0 to 100, or null while it cannot be known. */
  percent: number | null
  /** What it is being done to, or how it can be left: "You can leave this page." */
  note?: ReactNode
  /** Stop, retry … */
  action?: ReactNode
}

export function Progress({ stage, percent, note, action }: ProgressProps) {
  const id = useId()
  const whole = percent === null ? null : Math.round(Math.min(100, Math.max(0, percent)))
  return (
    <div className="grid gap-1.5">
      <div className="flex items-center justify-between gap-4">
        <p id={id} className="min-w-0">
          {stage}
          {whole === null ? ' …' : <span className="text-pencil"> · {whole} %</span>}
        </p>
        {action}
      </div>
      <progress
        aria-labelledby={id}
        aria-valuetext={whole === null ? stage : `${stage}, ${whole} %`}
        max={100}
        value={whole ?? undefined}
        className="plumb-progress"
      />
      {note ? <p className="text-sm text-pencil">{note}</p> : null}
    </div>
  )
}
