import type { Role } from '@shared/contracts/common'
import type { Group } from '@shared/contracts/groups'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { useJoin } from './api'
import { roleWords } from './role-words'

export interface JoinButtonProps {
  token: string
  role: Role
  onJoined: (group: Group) => void
}

export function JoinButton({ token, role, onJoined }: JoinButtonProps) {
  const join = useJoin()
  return (
    <div className="grid justify-items-start gap-3">
      {join.error ? (
        <Notice kind="fault">
          {join.error.code === 'already-there'
            ? 'You are in this group already, so the invitation is still good for somebody else.'
            : join.error.message}
        </Notice>
      ) : null}
      <Button
        look="primary"
        busy={join.isPending}
        onClick={() => join.mutate({ body: { token } }, { onSuccess: onJoined })}
      >
        Join as {roleWords[role]}
      </Button>
    </div>
  )
}
