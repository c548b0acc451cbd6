import type { ReactNode } from 'react'
import type { Group } from '@shared/contracts/groups'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { Page } from '@client/ui/page'
import { useGroup } from './api'

/** The group once it is known, or why it is not. */
export function GroupGate({ groupId, children }: { groupId: string; children: (group: Group) => ReactNode }) {
  const { data: group, error, refetch } = useGroup(groupId)
  if (error && (error.code === 'not-found' || error.code === 'invalid')) {
    return (
      <Page title="No such group" width="narrow">
        <Notice kind="fault">
          There is no group at this address, or you are not in it any more. Ask somebody in it for an invitation.
        </Notice>
      </Page>
    )
  }
  if (group) return children(group)
  if (error) {
    return (
      <Page title="Not reachable" width="narrow">
        <Notice kind="fault" next={<Button onClick={() => void refetch()}>Try again</Button>}>
          {error.message}
        </Notice>
      </Page>
    )
  }
  return (
    <p role="status" className="px-5 py-8 text-pencil">
      Opening the group
    </p>
  )
}
