import { useState } from 'react'
import { Link, useNavigate, useParams } from 'react-router-dom'
import type { Group } from '@shared/contracts/groups'
import { AccountMenu } from '@client/features/account/account-menu'
import { GroupGate } from '@client/features/groups/group-gate'
import { LiveSessions } from '@client/features/groups/live-sessions'
import { TakeList } from '@client/features/groups/take-list'
import { TuneList } from '@client/features/groups/tune-list'
import { UnheardTakes } from '@client/features/groups/unheard-takes'
import { useGroup } from '@client/features/groups/api'
import { useGroupFollow } from '@client/app/desk/use-group-follow'
import { NewTune } from '@client/features/tunes/new-tune'
import { paths } from '@client/lib/paths'
import { AppShell } from '@client/ui/app-shell'
import { Button, buttonClass } from '@client/ui/button'
import { Page } from '@client/ui/page'

export function GroupRoute() {
  const { groupId = '' } = useParams()
  const { data: group } = useGroup(groupId)
  useGroupFollow(groupId)
  return (
    <AppShell crumbs={group ? [{ label: group.name }] : []} right={<AccountMenu />}>
      <GroupGate groupId={groupId}>{(known) => <GroupPage key={known.id} group={known} />}</GroupGate>
    </AppShell>
  )
}

function GroupPage({ group }: { group: Group }) {
  const canAdd = group.abilities.includes('group:add-take')
  return (
    <Page
      title={group.name}
      actions={
        <Link to={paths.people(group.id)} className={buttonClass()}>
          People
        </Link>
      }
    >
      <LiveSessions groupId={group.id} />
      <TakeList
        groupId={group.id}
        how={
          canAdd
            ? 'Drop a recording on the first screen and keep it here.'
            : 'Somebody has to share one with you or with the group.'
        }
      />
      <TuneList
        groupId={group.id}
        action={group.abilities.includes('group:add-tune') ? <AddTune groupId={group.id} /> : null}
      />
      <UnheardTakes groupId={group.id} />
    </Page>
  )
}

function AddTune({ groupId }: { groupId: string }) {
  const [isAdding, setAdding] = useState(false)
  const navigate = useNavigate()
  return (
    <>
      <Button look="quiet" icon="plus" onClick={() => setAdding(true)}>
        New tune
      </Button>
      {isAdding ? (
        <NewTune
          groupId={groupId}
          onCreated={({ id }) => void navigate(paths.tune(id))}
          onClose={() => setAdding(false)}
        />
      ) : null}
    </>
  )
}
