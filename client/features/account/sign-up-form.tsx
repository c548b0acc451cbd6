import { useState } from 'react'
import { Link } from 'react-router-dom'
import type { Me } from '@shared/contracts/account'
import { limits } from '@shared/limits'
import { freshId } from '@client/lib/ids'
import { Button } from '@client/ui/button'
import { Form } from '@client/ui/faults'
import { TextField } from '@client/ui/text-field'
import { useSignUp } from './api'
import { EmailField } from './email-field'
import { entryFaults, roomOf } from './entry-faults'
import { GroupName } from './group-name'
import { PasswordField } from './password-field'
import { useEntry } from './use-entry'

export interface SignUpFormProps {
  /** The token of an invitation link: then no group is asked for. */
  invitation?: string
  /** Where somebody who has an account already goes on, with the typed e-mail taken along. */
  signInTo: string
  submitLabel: string
  onIn: (me: Me) => void
}

export function SignUpForm({ invitation, signInTo, submitLabel, onIn }: SignUpFormProps) {
  const signUp = useSignUp()
  const { form, passes } = useEntry(signUp.error)
  // Sent again with the same ids, so that a lost answer makes no second account.
  const [ids] = useState(() => ({ person: freshId(), group: freshId() }))
  const [name, setName] = useState('')
  const [email, setEmail] = useState('')
  const [password, setPassword] = useState('')
  /** Null while the proposed one will do. */
  const [groupName, setGroupName] = useState<string | null>(null)

  const handleSubmit = (): void => {
    const named = groupName === null ? {} : { groupName }
    if (!passes(entryFaults({ name, email, newPassword: password, ...named }))) return
    const where = invitation ? { invitation } : { group: { id: ids.group, name: (groupName ?? roomOf(name)).trim() } }
    signUp.mutate(
      { body: { id: ids.person, name: name.trim(), email: email.trim(), password, ...where } },
      { onSuccess: onIn }
    )
  }
  return (
    <Form {...form} onSubmit={handleSubmit}>
      {signUp.error?.code === 'already-there' ? (
        <p>
          <Link to={signInTo} state={{ email: email.trim() }}>
            Sign in with {email.trim()}
          </Link>
        </p>
      ) : null}
      <TextField
        label="Your name"
        name="name"
        autoComplete="name"
        maxLength={limits.name}
        value={name}
        hint="Seen only inside your group."
        onChange={(event) => setName(event.target.value)}
      />
      <EmailField value={email} onChange={setEmail} />
      <PasswordField label="Password" name="password" kind="new-password" value={password} onChange={setPassword} />
      {invitation ? null : <GroupName proposed={roomOf(name)} value={groupName} onChange={setGroupName} />}
      <div>
        <Button type="submit" look="primary" busy={signUp.isPending}>
          {submitLabel}
        </Button>
      </div>
    </Form>
  )
}
