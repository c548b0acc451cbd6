// What every field shares: a label above, a hint and a fault below, tied to the control by ids.
import { useId } from 'react'
import type { ReactNode } from 'react'
import { useFault } from './faults'

export interface FieldProps {
  label: ReactNode
  hint?: ReactNode
  /** A fault found in the browser; faults from the server come through the surrounding Form by `name`. */
  fault?: string | null
  name?: string
  /** Label for assistive technology only. */
  labelHidden?: boolean
  /** Says "(optional)" after the label. */
  optional?: boolean
}

export interface FieldControl {
  id: string
  'aria-describedby': string | undefined
  'aria-invalid': true | undefined
}

export const controlClass =
  'w-full min-w-0 rounded border border-pencil bg-sheet px-3 text-base text-ink disabled:opacity-60 ' +
  'aria-invalid:border-fault aria-invalid:outline-1 aria-invalid:outline-fault'

export function Field({
  label,
  hint,
  fault,
  name,
  labelHidden,
  optional,
  children
}: FieldProps & { children: (control: FieldControl) => ReactNode }) {
  const id = useId()
  const message = useFault(name, fault)
  const describedBy = [hint ? `${id}-hint` : '', message ? `${id}-fault` : ''].filter(Boolean).join(' ')
  return (
    <div className="grid min-w-0 content-start gap-1">
      <label htmlFor={id} className={labelHidden ? 'sr-only' : 'text-sm text-pencil'}>
        {label}
        {optional ? ' (optional)' : null}
      </label>
      {children({ id, 'aria-describedby': describedBy || undefined, 'aria-invalid': message ? true : undefined })}
      {hint ? (
        <p id={`${id}-hint`} className="text-sm text-pencil">
          {hint}
        </p>
      ) : null}
      {message ? <FieldFaultText id={`${id}-fault`}>{message}</FieldFaultText> : null}
    </div>
  )
}

export function FieldFaultText({ id, children }: { id: string; children: ReactNode }) {
  return (
    <p id={id} className="text-sm text-fault">
      <span aria-hidden="true">! </span>
      {children}
    </p>
  )
}
