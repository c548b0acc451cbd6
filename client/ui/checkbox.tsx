import { useId } from 'react'
import type { ComponentProps, ReactNode } from 'react'
import { useFault } from './faults'
import { FieldFaultText } from './field'

export interface CheckboxProps extends Omit<ComponentProps<'input'>, 'type' | 'id' | 'className' | 'onChange'> {
  label: ReactNode
  hint?: ReactNode
  fault?: string | null
  onChange?: (checked: boolean) => void
}

export function Checkbox({ label, hint, fault, name, onChange, ...rest }: CheckboxProps) {
  const id = useId()
  const message = useFault(name, fault)
  const describedBy = [hint ? `${id}-hint` : '', message ? `${id}-fault` : ''].filter(Boolean).join(' ')
  return (
    <div className="grid gap-1">
      <label htmlFor={id} className="flex min-h-6 items-start gap-2.5">
        <span className="flex h-6 items-center">
          <input
            {...rest}
            id={id}
            name={name}
            type="checkbox"
            aria-describedby={describedBy || undefined}
            aria-invalid={message ? true : undefined}
            onChange={(event) => onChange?.(event.target.checked)}
            className="plumb-mark"
          />
        </span>
        <span>{label}</span>
      </label>
      {hint ? (
        <p id={`${id}-hint`} className="pl-[26px] text-sm text-pencil">
          {hint}
        </p>
      ) : null}
      {message ? <FieldFaultText id={`${id}-fault`}>{message}</FieldFaultText> : null}
    </div>
  )
}
