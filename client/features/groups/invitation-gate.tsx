import type { ReactNode } from 'react'
import { Link } from 'react-router-dom'
import type { ResponseOf } from '@shared/contracts/route'
import type { invitationRoutes } from '@shared/contracts/groups'
import { paths } from '@client/lib/paths'
import { Button, buttonClass } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { useInvited } from './api'
import { withArticle } from './role-words'

export type Invited = ResponseOf<typeof invitationRoutes.look>

export interface InvitationGateProps {
  token: string
  /** How one goes on. */
  children: (invited: Invited) => ReactNode
}

/** Says who invites to what; or that the link is used up, and what to do then. */
export function InvitationGate({ token, children }: InvitationGateProps) {
  const { data: invited, error, refetch } = useInvited(token)
  if (token === '' || error?.code === 'invalid') {
    return (
      <Unusable title="This link is not whole">
        Copy all of it from the message you were sent, and open it again.
      </Unusable>
    )
  }
  if (error?.code === 'gone' || error?.code === 'not-found') {
    return (
      <Unusable title="This invitation cannot be used any more">
        It was used already, taken back, or it is too old. A link works once. Ask whoever sent it for a new one; if it
        was you who used it, you are in.
      </Unusable>
    )
  }
  if (error) {
    return (
      <Notice kind="fault" next={<Button onClick={() => void refetch()}>Try again</Button>}>
        {error.code === 'offline' ? 'The server cannot be reached.' : error.message}
      </Notice>
    )
  }
  if (!invited) {
    return (
      <p role="status" className="text-pencil">
        Looking where this leads
      </p>
    )
  }
  return (
    <>
      <p className="text-lg break-words">
        {invited.invitedBy} invites you to <strong className="font-semibold">{invited.groupName}</strong>, as{' '}
        {withArticle(invited.role)}.
      </p>
      {children(invited)}
    </>
  )
}

function Unusable({ title, children }: { title: string; children: ReactNode }) {
  return (
    <Notice
      kind="fault"
      title={title}
      next={
        <Link to={paths.home()} className={buttonClass()}>
          To the first screen
        </Link>
      }
    >
      {children}
    </Notice>
  )
}
