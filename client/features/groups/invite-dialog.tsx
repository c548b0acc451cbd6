import { useState } from 'react'
import type { Role } from '@shared/contracts/common'
import type { Group } from '@shared/contracts/groups'
import { limits } from '@shared/limits'
import { freshId } from '@client/lib/ids'
import { paths } from '@client/lib/paths'
import { Button } from '@client/ui/button'
import { Dialog } from '@client/ui/dialog'
import { Form } from '@client/ui/faults'
import { RadioGroup } from '@client/ui/radio-group'
import { TextField } from '@client/ui/text-field'
import { useInvite } from './api'
import { CopyField } from './copy-field'
import { mayTeach, roleChoices, withArticle } from './role-words'

/** Makes an invitation link and shows it, this once. */
export function InviteDialog({ group, onClose }: { group: Group; onClose: () => void }) {
  const invite = useInvite()
  const [id] = useState(freshId)
  const [role, setRole] = useState<Role>('member')
  const [note, setNote] = useState('')
  // Who may not give roles to those inside may not give the higher ones to those outside either.
  const choices = roleChoices.filter(({ value }) => group.abilities.includes('group:set-role') || !mayTeach(value))
  const made = invite.data
  if (made) {
    return (
      <Dialog
        title="Send this link"
        onClose={onClose}
        actions={
          <Button look="primary" onClick={onClose}>
            Done
          </Button>
        }
      >
        <div className="grid gap-3">
          <CopyField label="Invitation link" text={location.origin + paths.invitation(made.token)} />
          <p>
            It lets one person in, as {withArticle(made.role)}, and works for {limits.invitationDays} days. It is shown
            only now: copy it before you close this.
          </p>
        </div>
      </Dialog>
    )
  }
  const problem = invite.error
  return (
    <Dialog title={`Invite somebody to ${group.name}`} onClose={onClose}>
      <Form
        errors={problem?.fields ?? null}
        fault={problem && problem.fields.length === 0 ? problem.message : null}
        onSubmit={() => invite.mutate({ params: { groupId: group.id }, body: { id, role, note: note.trim() } })}
      >
        <RadioGroup legend="They come as" name="role" value={role} choices={choices} onChange={setRole} />
        <TextField
          label="For whom"
          name="note"
          optional
          autoComplete="off"
          maxLength={limits.title}
          value={note}
          hint="A note for those who invite, to tell the links apart."
          onChange={(event) => setNote(event.target.value)}
        />
        <div className="flex flex-wrap justify-end gap-3 pt-2 pb-3">
          <Button onClick={onClose}>Cancel</Button>
          <Button type="submit" look="primary" busy={invite.isPending}>
            Make the link
          </Button>
        </div>
      </Form>
    </Dialog>
  )
}
