import { useNavigate, useParams } from 'react-router-dom'
import type { Tune } from '@shared/contracts/tunes'
import { AccountMenu } from '@client/features/account/account-menu'
import { useMe } from '@client/features/account/api'
import { useGroup } from '@client/features/groups/api'
import { useTune } from '@client/features/tunes/api'
import { TuneActions } from '@client/features/tunes/tune-actions'
import { TunePage } from '@client/features/tunes/tune-page'
import { useChart } from '@client/features/tunes/use-chart'
import { useGroupFollow } from '@client/app/desk/use-group-follow'
import { paths } from '@client/lib/paths'
import { AppShell } from '@client/ui/app-shell'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { Page } from '@client/ui/page'

export function TuneRoute() {
  const { tuneId = '' } = useParams()
  const me = useMe()
  const tune = useTune(tuneId)
  if (tune.data && me.data) return <KnownTune key={tuneId} tune={tune.data} memberId={me.data.id} />
  return (
    <AppShell right={<AccountMenu />}>
      {tune.error ? (
        <Page title="No such tune" width="narrow">
          <Notice kind="fault" next={<Button onClick={() => void tune.refetch()}>Try again</Button>}>
            {tune.error.message}
          </Notice>
        </Page>
      ) : (
        <p role="status" className="px-5 py-8 text-pencil">
          The tune is being fetched
        </p>
      )}
    </AppShell>
  )
}

function KnownTune({ tune, memberId }: { tune: Tune; memberId: string }) {
  const { data: group } = useGroup(tune.groupId)
  const document = useChart(tune.id, memberId)
  const navigate = useNavigate()
  useGroupFollow(tune.groupId)
  return (
    <AppShell
      crumbs={[...(group ? [{ label: group.name, to: paths.group(group.id) }] : []), { label: tune.title }]}
      right={<AccountMenu />}
    >
      <TunePage
        tune={tune}
        document={document}
        actions={<TuneActions tune={tune} onRemoved={() => void navigate(paths.group(tune.groupId))} />}
      />
    </AppShell>
  )
}
