import { useParams } from 'react-router-dom'
import type { Group } from '@shared/contracts/groups'
import { AccountMenu } from '@client/features/account/account-menu'
import { useMe } from '@client/features/account/api'
import { useGroup, useLinks, usePeople } from '@client/features/groups/api'
import { GroupGate } from '@client/features/groups/group-gate'
import { GroupSettings } from '@client/features/groups/group-settings'
import { InvitationsSection } from '@client/features/groups/invitations-section'
import { LinksSection } from '@client/features/groups/links-section'
import { Roster } from '@client/features/groups/roster'
import { useGroupFollow } from '@client/app/desk/use-group-follow'
import { paths } from '@client/lib/paths'
import { AppShell } from '@client/ui/app-shell'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { Page, PageSection } from '@client/ui/page'

export function PeopleRoute() {
  const { groupId = '' } = useParams()
  const { data: group } = useGroup(groupId)
  const { data: me } = useMe()
  useGroupFollow(groupId)
  return (
    <AppShell
      crumbs={group ? [{ label: group.name, to: paths.group(group.id) }, { label: 'People' }] : []}
      right={<AccountMenu />}
    >
      <GroupGate groupId={groupId}>
        {(known) => (me ? <People key={known.id} group={known} meId={me.id} /> : null)}
      </GroupGate>
    </AppShell>
  )
}

function People({ group, meId }: { group: Group; meId: string }) {
  const people = usePeople(group.id)
  const links = useLinks(group.id)
  const problem = people.error ?? links.error
  const seesAll = group.isRosterShown || group.abilities.includes('group:edit')
  return (
    <Page title="People" lead={group.name}>
      {problem ? (
        <Notice
          kind="fault"
          next={<Button onClick={() => void Promise.all([people.refetch(), links.refetch()])}>Try again</Button>}
        >
          {problem.message}
        </Notice>
      ) : null}
      {people.data ? (
        <PageSection title="In this group">
          <Roster group={group} people={people.data.items} links={links.data?.items ?? []} meId={meId} />
          {seesAll ? null : (
            <p className="text-sm text-pencil">
              You see the owner, your teachers and students, and those you listen with. There may be others.
            </p>
          )}
        </PageSection>
      ) : null}
      {links.data ? <LinksSection group={group} links={links.data.items} meId={meId} /> : null}
      {group.abilities.includes('group:invite') ? <InvitationsSection group={group} meId={meId} /> : null}
      {group.abilities.includes('group:edit') ? <GroupSettings group={group} /> : null}
    </Page>
  )
}
