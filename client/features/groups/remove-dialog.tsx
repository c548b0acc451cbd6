import type { GroupPerson } from '@shared/contracts/groups'
import { useToast } from '@client/ui/toasts'
import { useRemovePerson } from './api'
import { SureDialog } from './sure-dialog'

export interface RemoveDialogProps {
  groupId: string
  person: GroupPerson
  onClose: () => void
}

export function RemoveDialog({ groupId, person, onClose }: RemoveDialogProps) {
  const remove = useRemovePerson()
  const toast = useToast()
  const handleRemove = (): void =>
    remove.mutate(
      { params: { groupId, userId: person.id } },
      {
        onSuccess: () => {
          toast({ text: `${person.name} is not in the group any more.` })
          onClose()
        }
      }
    )
  return (
    <SureDialog
      title={`Remove ${person.name}?`}
      keep="Keep them"
      confirm="Remove"
      isBusy={remove.isPending}
      problem={remove.error}
      onConfirm={handleRemove}
      onClose={onClose}
    >
      At once they see and hear nothing of this group any more. What they recorded and wrote here stays. To come back
      they need a new invitation.
    </SureDialog>
  )
}
