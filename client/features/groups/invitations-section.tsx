import { useState } from 'react'
import { allows } from '@shared/access/permissions'
import type { Relation } from '@shared/access/relations'
import type { Group, Invitation } from '@shared/contracts/groups'
import { limits } from '@shared/limits'
import { Button } from '@client/ui/button'
import { Empty } from '@client/ui/empty'
import { Notice } from '@client/ui/notice'
import { PageSection } from '@client/ui/page'
import { RelativeTime } from '@client/ui/relative-time'
import { useInvitations, useRevokeInvitation } from './api'
import { InviteDialog } from './invite-dialog'
import { roleWords } from './role-words'

const stateWords: Record<Invitation['state'], string> = {
  open: 'not used yet',
  used: 'used',
  expired: 'too old',
  revoked: 'taken back'
}

/** The group's invitation links: for those who may invite. */
export function InvitationsSection({ group, meId }: { group: Group; meId: string }) {
  const { data, error, refetch } = useInvitations(group.id)
  const [isInviting, setInviting] = useState(false)
  const invite = (
    <Button look="primary" icon="plus" onClick={() => setInviting(true)}>
      Invite somebody
    </Button>
  )
  return (
    <PageSection title="Invitations" aside={data && data.items.length > 0 ? invite : null}>
      {error ? (
        <Notice kind="fault" next={<Button onClick={() => void refetch()}>Try again</Button>}>
          {error.message}
        </Notice>
      ) : null}
      {data?.items.length === 0 ? (
        <Empty
          says="Invitation links you made stand here."
          how={`A link lets one person in and works for ${limits.invitationDays} days. There is no other way into the group.`}
          action={invite}
        />
      ) : (
        <ul className="grid">
          {data?.items.map((invitation) => (
            <InvitationRow key={invitation.id} invitation={invitation} group={group} meId={meId} />
          ))}
        </ul>
      )}
      {isInviting ? <InviteDialog group={group} onClose={() => setInviting(false)} /> : null}
    </PageSection>
  )
}

function InvitationRow({ invitation, group, meId }: { invitation: Invitation; group: Group; meId: string }) {
  const revoke = useRevokeInvitation()
  const isMine = invitation.createdBy.id === meId
  const held = new Set<Relation>(isMine ? [group.role, 'author'] : [group.role])
  const whom = invitation.note || `a ${roleWords[invitation.role]}`
  return (
    <li className="grid gap-2 border-b border-rule py-1.5">
      <div className="flex min-h-9 items-center justify-between gap-4">
        <div className="min-w-0">
          <p className="break-words">
            {invitation.note ? `${invitation.note} · ` : ''}
            {roleWords[invitation.role]}
          </p>
          <p className="text-sm text-pencil">
            {stateWords[invitation.state]} · made by {isMine ? 'you' : invitation.createdBy.name}{' '}
            <RelativeTime at={invitation.createdAt} notFocusable />
            {invitation.state === 'open' ? `, good until ${untilWords(invitation.expiresAt)}` : null}
          </p>
        </div>
        {invitation.state === 'open' && allows('invitation:revoke', held) ? (
          <span className="flex-none">
            <Button
              look="quiet"
              busy={revoke.isPending}
              aria-label={`Take back the invitation for ${whom}`}
              onClick={() => revoke.mutate({ params: { invitationId: invitation.id } })}
            >
              Take back
            </Button>
          </span>
        ) : null}
      </div>
      {revoke.error ? <Notice kind="fault">{revoke.error.message}</Notice> : null}
    </li>
  )
}

const untilWords = (at: string): string => new Date(at).toLocaleDateString('en-GB', { day: 'numeric', month: 'long' })
