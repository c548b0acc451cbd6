import { useState } from 'react'
import { limits } from '@shared/limits'
import { Checkbox } from '@client/ui/checkbox'
import { TextField } from '@client/ui/text-field'

export interface PasswordFieldProps {
  label: string
  name: string
  /** `new-password` lets the browser propose one and shows the least length. */
  kind: 'current-password' | 'new-password'
  value: string
  onChange: (value: string) => void
}

/** A password that may be pasted, filled in by the browser and looked at (WCAG 3.3.8). */
export function PasswordField({ label, name, kind, value, onChange }: PasswordFieldProps) {
  const [isShown, setShown] = useState(false)
  return (
    <div className="grid gap-2">
      <TextField
        label={label}
        name={name}
        type={isShown ? 'text' : 'password'}
        autoComplete={kind}
        autoCapitalize="none"
        autoCorrect="off"
        spellCheck={false}
        value={value}
        hint={
          kind === 'new-password' ? `At least ${limits.passwordMin} characters. A few words make a good one.` : null
        }
        onChange={(event) => onChange(event.target.value)}
      />
      <Checkbox label={`Show ${label.toLowerCase()}`} checked={isShown} onChange={setShown} />
    </div>
  )
}
