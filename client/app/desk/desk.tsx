// Everything about one take. Here: what must be known before there is a desk, and what stands there meanwhile.
import { useCallback } from 'react'
import { useNavigate } from 'react-router-dom'
import type { Me } from '@shared/contracts/account'
import { useTake } from '@client/features/takes/api'
import { useMe } from '@client/features/account/api'
import { paths } from '@client/lib/paths'
import { AppShell } from '@client/ui/app-shell'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { Page } from '@client/ui/page'
import { useToast } from '@client/ui/toasts'
import type { Take } from '@shared/contracts/takes'
import { TakeDesk } from './take-desk'
import { useDeskPlayer } from './use-desk-player'
import { useGroupFollow } from './use-group-follow'

export function Desk({ takeId }: { takeId: string }) {
  const me = useMe()
  const take = useTake(takeId)
  if (take.data && me.data) return <DeskOf me={me.data} take={take.data} />
  if (take.error)
    return <NoTake code={take.error.code} message={take.error.message} onAgain={() => void take.refetch()} />
  return (
    <AppShell>
      <p role="status" className="px-5 py-8 text-pencil">
        Opening the take
      </p>
    </AppShell>
  )
}

function NoTake({ code, message, onAgain }: { code: string; message: string; onAgain: () => void }) {
  const isHidden = code === 'not-found' || code === 'forbidden'
  return (
    <AppShell>
      <Page title={isHidden ? 'No such take for you' : 'Not reachable'} width="narrow">
        {isHidden ? (
          <Notice>
            There is no take at this address that you may hear. Whoever brought it can share it with you, or it may have
            been deleted.
          </Notice>
        ) : (
          <Notice kind="fault" next={<Button onClick={onAgain}>Try again</Button>}>
            {message}
          </Notice>
        )}
      </Page>
    </AppShell>
  )
}

function DeskOf({ me, take }: { me: Me; take: Take }) {
  const toast = useToast()
  const navigate = useNavigate()
  const tell = useCallback((text: string) => toast({ text }), [toast])
  const { player, missing } = useDeskPlayer(take, tell)
  useGroupFollow(take.groupId)
  if (!player) return null
  return (
    <TakeDesk
      me={me}
      take={take}
      player={player}
      missing={missing}
      onGone={() => void navigate(paths.group(take.groupId))}
    />
  )
}
