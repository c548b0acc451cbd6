// A listening session on the desk: what to show, and the controls that take the place of the player's own.
import { useCallback, useEffect, useMemo, useRef, useState } from 'react'
import type { Me } from '@shared/contracts/account'
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'
import { ApiProblem } from '@client/lib/api'
import { useScope } from '@client/lib/scope'
import type { TransportControls } from '@client/transport/controls'
import type { Player } from '@client/transport/player'
import { createListening, type Listening, type ListeningState } from '@client/features/sessions/listening'

interface Input {
  /** The session the address names; null for listening alone. */
  sessionId: string | null
  me: Pick<Me, 'id'>
  player: Player | null
  /** Over, or left: the address has to forget it. */
  onOver(reason: string | null): void
  /** A control was used that only the leader has. */
  onRefused(sentence: string): void
}

export interface DeskSession {
  state: ListeningState
  isLeader: boolean
  leaderName: string | null
  /** Null while stepped away: then one's own player is one's own. */
  controls: TransportControls | null
  sharedSec(): Sec
  gapSec(): Sec | null
  step(isAway: boolean): void
  lead(personId: string): void
  allowSound(): void
  show(span: Span | null): void
  leave(): void
}

export const useSession = ({ sessionId, me, player, onOver, onRefused }: Input): DeskSession | null => {
  const [state, setState] = useState<ListeningState | null>(null)
  const listening = useRef<Listening | null>(null)
  const handlers = useRef({ onOver, onRefused })
  useEffect(() => {
    handlers.current = { onOver, onRefused }
  })

  useScope(
    (scope) => {
      if (!sessionId || !player) return
      const part = createListening({
        player,
        sessionId,
        meId: me.id,
        onState: setState,
        onOver: (reason) => handlers.current.onOver(reason)
      })
      listening.current = part
      scope.add(() => {
        listening.current = null
        part.leave()
      })
    },
    [sessionId, me.id, player]
  )

  const tell = useCallback((work: Promise<void> | undefined): void => {
    work?.catch((error: unknown) => {
      if (error instanceof ApiProblem) handlers.current.onRefused(error.message)
      else throw error
    })
  }, [])

  const isLeader = state?.session.leaderId === me.id
  const leader = state?.session.people.find((one) => one.id === state.session.leaderId) ?? null
  const leaderName = leader?.name ?? null

  const controls = useMemo((): TransportControls => {
    const refuse = (): void =>
      handlers.current.onRefused(
        `${leaderName ?? 'Somebody else'} leads and moves the line for everybody. Step away to move your own.`
      )
    const change = (what: Parameters<Listening['change']>[0]): void =>
      isLeader ? tell(listening.current?.change(what)) : refuse()
    return {
      play: () => change({ playing: true }),
      pause: () => {
        // The leader hears the pause at once; the others are told where it was.
        if (isLeader && player) {
          player.pause()
          change({ playing: false, positionSec: player.heardPosition })
        } else refuse()
      },
      seek: (positionSec) => change({ positionSec }),
      setRate: (rate) => {
        // At once for the leader: a slider that waits for the server loses the steps of a held key.
        if (isLeader) player?.setRate(rate)
        change({ rate })
      },
      setLoop: (loop) => change({ loop })
    }
  }, [isLeader, leaderName, player, tell])

  return useMemo(() => {
    if (!state) return null
    return {
      state,
      isLeader,
      leaderName,
      controls: state.isAway ? null : controls,
      sharedSec: () => listening.current?.sharedSec() ?? 0,
      gapSec: () => listening.current?.gapSec() ?? null,
      step: (isAway) => tell(listening.current?.step(isAway)),
      lead: (personId) => tell(listening.current?.lead(personId)),
      allowSound: () => listening.current?.allowSound(),
      show: (span) => listening.current?.show(span),
      leave: () => {
        listening.current?.leave()
        handlers.current.onOver(null)
      }
    }
  }, [state, isLeader, leaderName, controls, tell])
}
