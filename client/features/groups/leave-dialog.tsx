import { useNavigate } from 'react-router-dom'
import type { Group } from '@shared/contracts/groups'
import { paths } from '@client/lib/paths'
import { useToast } from '@client/ui/toasts'
import { useLeaveGroup } from './api'
import { SureDialog } from './sure-dialog'

export function LeaveDialog({ group, onClose }: { group: Group; onClose: () => void }) {
  const leave = useLeaveGroup()
  const navigate = useNavigate()
  const toast = useToast()
  const handleLeave = (): void =>
    leave.mutate(
      { params: { groupId: group.id } },
      {
        onSuccess: () => {
          toast({ text: `You have left ${group.name}.` })
          void navigate(paths.home())
        }
      }
    )
  return (
    <SureDialog
      title={`Leave ${group.name}?`}
      keep="Stay"
      confirm="Leave"
      isBusy={leave.isPending}
      problem={leave.error}
      onConfirm={handleLeave}
      onClose={onClose}
    >
      You see and hear nothing of this group any more. What you recorded and wrote here stays: delete first what should
      not. To come back you need a new invitation.
    </SureDialog>
  )
}
