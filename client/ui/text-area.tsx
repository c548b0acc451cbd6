import type { ComponentProps } from 'react'
import { cx } from './classes'
import { Field, controlClass } from './field'
import type { FieldProps } from './field'

export type TextAreaProps = FieldProps & Omit<ComponentProps<'textarea'>, keyof FieldProps | 'id' | 'className'>

export function TextArea({ label, hint, fault, name, labelHidden, optional, rows = 3, ...rest }: TextAreaProps) {
  return (
    <Field {...{ label, hint, fault, name, labelHidden, optional }}>
      {(control) => (
        <textarea {...rest} {...control} name={name} rows={rows} className={cx(controlClass, 'resize-y py-2')} />
      )}
    </Field>
  )
}
