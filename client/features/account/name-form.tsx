import { useState } from 'react'
import type { Me } from '@shared/contracts/account'
import { limits } from '@shared/limits'
import { Button } from '@client/ui/button'
import { Form } from '@client/ui/faults'
import { TextField } from '@client/ui/text-field'
import { useToast } from '@client/ui/toasts'
import { useUpdateMe } from './api'
import { entryFaults } from './entry-faults'
import { useEntry } from './use-entry'

export function NameForm({ me }: { me: Me }) {
  const update = useUpdateMe()
  const toast = useToast()
  const { form, passes } = useEntry(update.error)
  const [name, setName] = useState(me.name)
  const handleSubmit = (): void => {
    if (!passes(entryFaults({ name }))) return
    update.mutate(
      { body: { name: name.trim() } },
      {
        onSuccess: (changed) => {
          setName(changed.name)
          toast({ text: `Your name is ${changed.name} now.` })
        }
      }
    )
  }
  return (
    <Form {...form} onSubmit={handleSubmit}>
      <TextField
        label="Your name"
        name="name"
        autoComplete="name"
        maxLength={limits.name}
        value={name}
        hint="Seen only inside your groups."
        onChange={(event) => setName(event.target.value)}
      />
      <div>
        <Button type="submit" busy={update.isPending}>
          Change name
        </Button>
      </div>
    </Form>
  )
}
