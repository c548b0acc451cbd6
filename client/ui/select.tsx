import type { ComponentProps } from 'react'
import { cx } from './classes'
import { Field, controlClass } from './field'
import type { FieldProps } from './field'
import { Icon } from './icon'

export interface Choice<V extends string = string> {
  value: V
  label: string
  /** A line of explanation where there is room for one. */
  note?: string
  disabled?: boolean
}

export type SelectProps<V extends string> = FieldProps &
  Omit<ComponentProps<'select'>, keyof FieldProps | 'id' | 'className' | 'value' | 'onChange' | 'children'> & {
    value: V
    choices: readonly Choice<V>[]
    onChange: (value: V) => void
  }

export function Select<V extends string>(props: SelectProps<V>) {
  const { label, hint, fault, name, labelHidden, optional, value, choices, onChange, ...rest } = props
  return (
    <Field {...{ label, hint, fault, name, labelHidden, optional }}>
      {(control) => (
        <div className="relative">
          <select
            {...rest}
            {...control}
            name={name}
            value={value}
            onChange={(event) => onChange(event.target.value as V)}
            className={cx(controlClass, 'h-10 appearance-none pr-9')}
          >
            {choices.map((choice) => (
              <option key={choice.value} value={choice.value} disabled={choice.disabled}>
                {choice.label}
              </option>
            ))}
          </select>
          <span className="pointer-events-none absolute inset-y-0 right-3 flex items-center">
            <Icon name="chevronDown" size={16} />
          </span>
        </div>
      )}
    </Field>
  )
}
