import { useState } from 'react'
import type { Me } from '@shared/contracts/account'
import { Button } from '@client/ui/button'
import { Form } from '@client/ui/faults'
import { useSignIn } from './api'
import { EmailField } from './email-field'
import { entryFaults } from './entry-faults'
import { PasswordField } from './password-field'
import { useEntry } from './use-entry'

export interface SignInFormProps {
  /** Typed before, on the way here. */
  email?: string
  onIn: (me: Me) => void
}

export function SignInForm({ email: typed = '', onIn }: SignInFormProps) {
  const signIn = useSignIn()
  const { form, passes } = useEntry(signIn.error)
  const [email, setEmail] = useState(typed)
  const [password, setPassword] = useState('')
  const handleSubmit = (): void => {
    if (!passes(entryFaults({ email, password }))) return
    signIn.mutate({ body: { email: email.trim(), password } }, { onSuccess: onIn })
  }
  return (
    <Form {...form} onSubmit={handleSubmit}>
      <EmailField value={email} onChange={setEmail} />
      <PasswordField label="Password" name="password" kind="current-password" value={password} onChange={setPassword} />
      <div>
        <Button type="submit" look="primary" busy={signIn.isPending}>
          Sign in
        </Button>
      </div>
    </Form>
  )
}
