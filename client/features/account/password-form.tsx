import { useState } from 'react'
import type { Me } from '@shared/contracts/account'
import { Button } from '@client/ui/button'
import { Form } from '@client/ui/faults'
import { useToast } from '@client/ui/toasts'
import { useChangePassword } from './api'
import { entryFaults } from './entry-faults'
import { PasswordField } from './password-field'
import { useEntry } from './use-entry'

export function PasswordForm({ me }: { me: Me }) {
  const change = useChangePassword()
  const toast = useToast()
  const { form, passes } = useEntry(change.error)
  const [current, setCurrent] = useState('')
  const [next, setNext] = useState('')
  const handleSubmit = (): void => {
    const faults = entryFaults({ newPassword: next }, { newPassword: 'next' })
    if (current === '') faults.unshift({ in: 'body', path: 'current', message: 'Write the password you have now.' })
    if (!passes(faults)) return
    change.mutate(
      { body: { current, next } },
      {
        onSuccess: () => {
          setCurrent('')
          setNext('')
          toast({ text: 'Password changed. Everywhere else you are signed out.' })
        }
      }
    )
  }
  return (
    <Form {...form} onSubmit={handleSubmit}>
      {/* Tells a password manager whose password this is. */}
      <input type="text" autoComplete="username" value={me.email} readOnly hidden />
      <PasswordField
        label="Present password"
        name="current"
        kind="current-password"
        value={current}
        onChange={setCurrent}
      />
      <PasswordField label="New password" name="next" kind="new-password" value={next} onChange={setNext} />
      <p className="text-sm text-pencil">
        Everywhere else you are signed in, on other machines and in other browsers, you will be signed out. Here you
        stay.
      </p>
      <div>
        <Button type="submit" busy={change.isPending}>
          Change password
        </Button>
      </div>
    </Form>
  )
}
