// One person's part in a listening session: joining, the clock, the shared transport, stepping away, coming back by itself.
import type { z } from 'zod'
import type { Session, TransportState } from '@shared/contracts/sessions'
import type { serverEvents } from '@shared/events/realtime'
import { createClockEstimator } from '@shared/timing/clock'
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'
import { ApiProblem } from '@client/lib/api'
import { createScope } from '@client/lib/scope'
import { ask, roomSocket } from '@client/lib/socket'
import type { Player } from '@client/transport/player'
import { createKeepTogether } from '@client/features/sessions/keep-together'

export interface ListeningState {
  session: Session
  isAway: boolean
  /** The browser wants one tap before it lets sound out. */
  needsTap: boolean
  isConnected: boolean
  pointers: ReadonlyMap<string, Span>
}

interface Deps {
  player: Player
  sessionId: string
  meId: string
  onState(state: ListeningState | null): void
  /** Over or not allowed any more: why, for the person. */
  onOver(reason: string): void
}

const clockBurst = 6
const clockBurstMs = 120
const clockEveryMs = 4000
const pointerEveryMs = 100

export const createListening = ({ player, sessionId, meId, onState, onOver }: Deps) => {
  const scope = createScope()
  const socket = roomSocket()
  const clock = createClockEstimator()
  let state: ListeningState | null = null
  let isOver = false
  /** Changes of one's own that are on their way: what comes back meanwhile is older than what the hand has done. */
  let changesOut = 0

  const together = createKeepTogether({
    player,
    serverNow: () => clock.serverNow(performance.now()),
    timeout: (work, ms) => scope.timeout(work, ms),
    localNow: () => performance.now(),
    onBlocked: () => update({ needsTap: true })
  })

  const update = (change: Partial<ListeningState>): void => {
    if (!state || isOver) return
    state = { ...state, ...change }
    onState(state)
  }
  const follow = (transport: TransportState): void => {
    if (!state) return
    together.apply({ ...transport, durationSec: player.durationSec })
  }
  const end = (reason: string): void => {
    if (isOver) return
    isOver = true
    together.letGo()
    player.pause()
    scope.dispose()
    onState(null)
    onOver(reason)
  }

  const askClock = async (): Promise<void> => {
    const sentMs = performance.now()
    const { serverMs } = await ask('clock:ask', {})
    clock.add({ sentMs, serverMs, receivedMs: performance.now() })
  }
  const keepClock = (left: number): void => {
    askClock()
      .catch(() => undefined)
      .finally(() => {
        if (!isOver) scope.timeout(() => keepClock(Math.max(0, left - 1)), left > 0 ? clockBurstMs : clockEveryMs)
      })
  }

  const join = async (): Promise<void> => {
    try {
      await askClock()
      const session = await ask('session:join', { sessionId })
      if (isOver) return
      const wasAway = state?.isAway ?? session.people.find((one) => one.id === meId)?.isAway ?? false
      state = { session, isAway: wasAway, needsTap: state?.needsTap ?? false, isConnected: true, pointers: new Map() }
      onState(state)
      if (wasAway) together.letGo()
      follow(session.transport)
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error
      if (error.code === 'offline' || error.code === 'unavailable' || error.code === 'too-many') {
        // The next connection joins again; if it never broke, so do we.
        if (socket.connected) scope.timeout(() => void join(), 1500)
      } else end(error.message)
    }
  }

  const handleState = (session: z.infer<(typeof serverEvents)['session:state']>): void => {
    if (session.id !== sessionId || !state) return
    if (session.endedAt) return end('The listening session is over.')
    // Older transport than known can arrive after a newer one was acknowledged.
    const transport =
      session.transport.revision >= state.session.transport.revision ? session.transport : state.session.transport
    update({ session: { ...session, transport, abilities: state.session.abilities } })
    if (transport !== state.session.transport) follow(transport)
  }
  const handleTransport = ({
    sessionId: id,
    ...transport
  }: z.infer<(typeof serverEvents)['transport:state']>): void => {
    if (id !== sessionId || !state || transport.revision <= state.session.transport.revision) return
    update({ session: { ...state.session, transport } })
    follow(transport)
  }
  const handlePointer = ({ sessionId: id, personId, span }: z.infer<(typeof serverEvents)['pointer:shown']>): void => {
    if (id !== sessionId || !state) return
    const pointers = new Map(state.pointers)
    if (span) pointers.set(personId, span)
    else pointers.delete(personId)
    update({ pointers })
  }
  const handleConnect = (): void => void join()
  const handleLost = (): void => update({ isConnected: false })

  socket.on('session:state', handleState)
  socket.on('transport:state', handleTransport)
  socket.on('pointer:shown', handlePointer)
  socket.on('connect', handleConnect)
  socket.on('disconnect', handleLost)
  scope.add(() => {
    socket.off('session:state', handleState)
    socket.off('transport:state', handleTransport)
    socket.off('pointer:shown', handlePointer)
    socket.off('connect', handleConnect)
    socket.off('disconnect', handleLost)
  })
  scope.add(player.on('turn', together.turned))
  // A take that was still loading when the session was joined catches up now.
  scope.add(
    player.on('state', (now) => {
      if (now === 'ready' && state && !state.isAway && state.session.transport.playing && !state.needsTap)
        follow(state.session.transport)
    })
  )
  keepClock(clockBurst)
  if (socket.connected) void join()
  else socket.connect()

  let shownAt = 0
  let cancelShow = (): void => undefined
  return {
    /** Asks for a change of the shared transport: only the leader's is granted. */
    change: async (change: {
      positionSec?: Sec
      playing?: boolean
      rate?: number
      loop?: Span | null
    }): Promise<void> => {
      changesOut += 1
      try {
        const transport = await ask('transport:change', { sessionId, ...change })
        handleTransport({ ...transport, sessionId })
      } finally {
        changesOut -= 1
        if (state && !isOver) follow(state.session.transport)
      }
    },
    step: async (isAway: boolean): Promise<void> => {
      update({ isAway })
      if (isAway) together.letGo()
      else if (state) together.follow({ ...state.session.transport, durationSec: player.durationSec })
      await ask('session:step', { sessionId, isAway })
    },
    lead: async (leaderId: string): Promise<void> => {
      const session = await ask('session:lead', { sessionId, leaderId })
      update({ session })
    },
    /** After the person's tap: sound may start now. */
    allowSound: (): void => {
      update({ needsTap: false })
      if (state) follow(state.session.transport)
    },
    /** Shows the others what is selected here; throttled, the last one always goes out. */
    show: (span: Span | null): void => {
      cancelShow()
      const send = (): void => {
        shownAt = performance.now()
        if (socket.connected) void ask('pointer:show', { sessionId, span }).catch(() => undefined)
      }
      const wait = shownAt + pointerEveryMs - performance.now()
      if (wait <= 0) send()
      else cancelShow = scope.timeout(send, wait)
    },
    sharedSec: (): Sec => {
      const transport = state?.session.transport
      if (!transport) return 0
      return together.wantedSec() ?? transport.positionSec
    },
    gapSec: (): Sec | null => together.gap(),
    leave: (): void => {
      if (isOver) return
      isOver = true
      together.letGo()
      if (socket.connected) void ask('session:leave', { sessionId }).catch(() => undefined)
      scope.dispose()
      onState(null)
    }
  }
}
export type Listening = ReturnType<typeof createListening>
