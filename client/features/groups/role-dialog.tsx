import { useState } from 'react'
import type { GroupPerson } from '@shared/contracts/groups'
import { Button } from '@client/ui/button'
import { Dialog } from '@client/ui/dialog'
import { Notice } from '@client/ui/notice'
import { RadioGroup } from '@client/ui/radio-group'
import { useToast } from '@client/ui/toasts'
import { useSetRole } from './api'
import { roleChoices, withArticle } from './role-words'

export interface RoleDialogProps {
  groupId: string
  person: GroupPerson
  onClose: () => void
}

export function RoleDialog({ groupId, person, onClose }: RoleDialogProps) {
  const setRole = useSetRole()
  const toast = useToast()
  const [role, setChosen] = useState(person.role)
  const handleSet = (): void => {
    if (role === person.role) return onClose()
    setRole.mutate(
      { params: { groupId, userId: person.id }, body: { role } },
      {
        onSuccess: () => {
          toast({ text: `${person.name} is ${withArticle(role)} now.` })
          onClose()
        }
      }
    )
  }
  return (
    <Dialog
      title={`Role of ${person.name}`}
      onClose={onClose}
      actions={
        <>
          <Button onClick={onClose}>Cancel</Button>
          <Button look="primary" busy={setRole.isPending} onClick={handleSet}>
            Set role
          </Button>
        </>
      }
    >
      <div className="grid gap-3">
        {setRole.error ? <Notice kind="fault">{setRole.error.message}</Notice> : null}
        <RadioGroup legend="Role" legendHidden value={role} choices={roleChoices} onChange={setChosen} />
      </div>
    </Dialog>
  )
}
