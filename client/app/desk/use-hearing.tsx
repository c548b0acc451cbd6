// Who holds the sound at this desk: the person alone, or the room they listen in together.
import { useEffect, useMemo, useState, type ReactNode } from 'react'
import { useLocation } from 'react-router-dom'
import type { Me } from '@shared/contracts/account'
import type { Take } from '@shared/contracts/takes'
import type { Span } from '@shared/timing/types'
import { useEndSession, useLiveSessions, useStartSession } from '@client/features/sessions/api'
import { SessionBar } from '@client/features/sessions/session-bar'
import { SessionPeople } from '@client/features/sessions/session-people'
import { SoundTap } from '@client/features/sessions/sound-tap'
import { useSession, type DeskSession } from '@client/features/sessions/use-session'
import { freshId } from '@client/lib/ids'
import { useLatest } from '@client/lib/use-latest'
import type { LineSource } from '@client/timeline/timeline-types'
import { soloControls, type LoopWays, type TransportControls } from '@client/transport/controls'
import type { Player } from '@client/transport/player'
import { useToast } from '@client/ui/toasts'

export interface Pointed {
  name: string
  span: Span
}

export interface Hearing {
  /** All that the desk does to the sound goes through these. */
  controls: TransportControls
  /** They are everybody's: place, loop and speed are shared. */
  isShared: boolean
  /** Plumb lines, when there are more than one's own. */
  lines?: readonly LineSource[]
  /** The name the line hangs from. */
  leaderName?: string
  /** Right end of the bar at the top. */
  header: ReactNode
  /** On top of the margin's People. */
  people: ReactNode
  /** What the others point at. */
  pointed: readonly Pointed[]
}

/** Which session the address names. Kept beside the router: the desk renames its address all the time. */
const useSessionAddress = (): [string | null, (id: string | null) => void] => {
  const location = useLocation()
  const named = new URLSearchParams(location.search).get('session')
  const [id, setId] = useState(named)
  const [seenKey, setSeenKey] = useState(location.key)
  if (seenKey !== location.key) {
    setSeenKey(location.key)
    setId(named)
  }
  const change = (next: string | null): void => {
    setId(next)
    const url = new URL(window.location.href)
    if (next) url.searchParams.set('session', next)
    else url.searchParams.delete('session')
    window.history.replaceState(window.history.state, '', url)
  }
  return [id, change]
}

export interface HearingDeps {
  me: Me
  take: Take
  player: Player
  selection: Span | null
  /** How the loop goes round alone. */
  ways: LoopWays
}

export const useHearing = ({ me, take, player, selection, ways }: HearingDeps): Hearing => {
  const toast = useToast()
  const [sessionId, setSessionId] = useSessionAddress()
  const live = useLiveSessions(take.groupId)
  const start = useStartSession()
  const end = useEndSession()
  const tell = (text: string): void => toast({ text })
  const session = useSession({
    sessionId,
    me,
    player: take.state === 'ready' ? player : null,
    onOver: (reason) => {
      setSessionId(null)
      if (reason) tell(reason)
    },
    onRefused: tell
  })
  const solo = useMemo(() => soloControls(player, ways), [player, ways])
  const lines = useMemo(() => (session?.state.isAway ? linesApart(session, player) : undefined), [session, player])
  const openHere = live.data?.items.find(({ takeId }) => takeId === take.id) ?? null

  const isShared = session?.controls != null
  useEffect(() => {
    // What one had set for oneself stays out of what all hear.
    if (isShared && player.loop) player.setLoop({ span: player.loop.span })
  }, [isShared, player])

  const latest = useLatest(session)
  const isInside = session !== null
  useEffect(() => {
    if (isInside) latest.current?.show(selection)
  }, [isInside, selection, latest])

  const handleStart = () =>
    start.mutate(
      { params: { takeId: take.id }, body: { id: freshId() } },
      { onSuccess: ({ id }) => setSessionId(id), onError: ({ message }) => tell(message) }
    )

  return {
    controls: session?.controls ?? solo,
    isShared,
    ...(lines ? { lines } : {}),
    ...(session?.leaderName && !session.state.isAway ? { leaderName: firstName(session.leaderName) } : {}),
    header: session ? (
      <>
        <SessionBar
          session={session}
          meId={me.id}
          onEnd={() => sessionId && end.mutate({ params: { sessionId } }, { onError: ({ message }) => tell(message) })}
        />
        {session.state.needsTap && !session.state.isAway ? (
          <SoundTap leaderName={session.leaderName} onAllow={session.allowSound} onLeave={session.leave} />
        ) : null}
      </>
    ) : null,
    people: (
      <SessionPeople
        session={session}
        meId={me.id}
        live={openHere}
        mayStart={take.abilities.includes('take:session') && take.state === 'ready'}
        isStarting={start.isPending}
        onStart={handleStart}
        onJoin={setSessionId}
      />
    ),
    pointed: session ? pointedBy(session, me.id) : []
  }
}

const firstName = (name: string): string => name.split(' ')[0] ?? name

/** Stepped away: one's own line in ink, the brass one where the others are. */
const linesApart = (session: DeskSession, player: Player): LineSource[] => [
  { kind: 'own', positionSec: () => player.heardPosition },
  {
    kind: 'session',
    positionSec: session.sharedSec,
    ...(session.leaderName ? { label: firstName(session.leaderName) } : {})
  }
]

const pointedBy = ({ state }: DeskSession, meId: string): Pointed[] =>
  [...state.pointers].flatMap(([id, span]) => {
    const person = state.session.people.find((one) => one.id === id)
    return person && id !== meId ? [{ name: person.name, span }] : []
  })
