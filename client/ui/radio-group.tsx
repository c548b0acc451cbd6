import { useId } from 'react'
import type { ReactNode } from 'react'
import { cx } from './classes'
import { useFault } from './faults'
import { FieldFaultText } from './field'
import type { Choice } from './select'

export interface RadioGroupProps<V extends string> {
  legend: ReactNode
  value: V
  choices: readonly Choice<V>[]
  onChange: (value: V) => void
  name?: string
  fault?: string | null
  /** Side by side where there is room. */
  inline?: boolean
  legendHidden?: boolean
}

/** Native radio buttons: arrows move, one tab stop. */
export function RadioGroup<V extends string>(props: RadioGroupProps<V>) {
  const { legend, value, choices, onChange, name, fault, inline = false, legendHidden = false } = props
  const id = useId()
  const message = useFault(name, fault)
  return (
    <fieldset className="min-w-0" aria-describedby={message ? `${id}-fault` : undefined}>
      <legend className={legendHidden ? 'sr-only' : 'mb-1 text-sm text-pencil'}>{legend}</legend>
      <div className={cx(inline ? 'flex flex-wrap gap-x-5 gap-y-1' : 'grid gap-1')}>
        {choices.map((choice) => (
          <label key={choice.value} className="flex min-h-6 items-start gap-2.5">
            <span className="flex h-6 items-center">
              <input
                type="radio"
                name={name ?? id}
                value={choice.value}
                checked={choice.value === value}
                disabled={choice.disabled}
                onChange={() => onChange(choice.value)}
                className="plumb-mark"
              />
            </span>
            <span>
              {choice.label}
              {choice.note ? <span className="block text-sm text-pencil">{choice.note}</span> : null}
            </span>
          </label>
        ))}
      </div>
      {message ? <FieldFaultText id={`${id}-fault`}>{message}</FieldFaultText> : null}
    </fieldset>
  )
}
