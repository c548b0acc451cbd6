import { TextField } from '@client/ui/text-field'

export function EmailField({ value, onChange }: { value: string; onChange: (value: string) => void }) {
  return (
    <TextField
      label="E-mail"
      name="email"
      type="email"
      // The name by which password managers know the account.
      autoComplete="username"
      autoCapitalize="none"
      spellCheck={false}
      value={value}
      onChange={(event) => onChange(event.target.value)}
    />
  )
}
