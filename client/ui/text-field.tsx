import type { ComponentProps } from 'react'
import { cx } from './classes'
import { Field, controlClass } from './field'
import type { FieldProps } from './field'

export type TextFieldProps = FieldProps & Omit<ComponentProps<'input'>, keyof FieldProps | 'id' | 'className'>

export function TextField({ label, hint, fault, name, labelHidden, optional, type = 'text', ...rest }: TextFieldProps) {
  return (
    <Field {...{ label, hint, fault, name, labelHidden, optional }}>
      {(control) => <input {...rest} {...control} name={name} type={type} className={cx(controlClass, 'h-10')} />}
    </Field>
  )
}
