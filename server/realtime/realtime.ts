// Puts the socket side together: handshake, events, dispatch of what was committed, presence, lost rights.
import type { Server as HttpServer } from 'node:http'
import type { RequestHandler } from 'express'
import { eventChannel } from '@server/repositories/events.repo'
import { progressChannel } from '@server/jobs/ingest.job'
import type { AccountsRepo } from '@server/repositories/accounts.repo'
import type { AccessRepo } from '@server/repositories/access.repo'
import type { TakesRepo } from '@server/repositories/takes.repo'
import type { SessionsRepo } from '@server/repositories/sessions.repo'
import { allows } from '@shared/access/permissions'
import type { GroupEvent } from '@shared/contracts/group-events'
import { takeRelations } from '@server/access/take-relations'
import type { Relations } from '@server/access/relations'
import type { Actor } from '@server/http/handlers'
import type { Logger } from '@server/logger'
import { createDispatch } from '@server/realtime/dispatch'
import { createEventHandlers } from '@server/realtime/handlers'
import { createListener } from '@server/realtime/listener'
import { createPresence } from '@server/realtime/presence'
import { createRooms, groupRoom, sessionRoom, watchRoom } from '@server/realtime/rooms'
import { attach, createIo, type RoomSocket } from '@server/realtime/socket'
import type { GroupEventService } from '@server/services/group-events.service'
import type { SessionService } from '@server/services/sessions.service'

interface Deps {
  http: HttpServer
  databaseUrl: string
  relations: Relations
  accounts: Pick<AccountsRepo, 'livingSignIns'>
  access: Pick<AccessRepo, 'takeStanding'>
  takes: Pick<TakesRepo, 'home'>
  sessionsRepo: Pick<SessionsRepo, 'here'>
  sessions: SessionService
  groupEvents: GroupEventService
  signIn: readonly RequestHandler[]
  log: Logger
  now(): number
}

/** How often open sockets' sign-ins are looked at, and gone people noticed, ms. */
const sweepEveryMs = 800

export const startRealtime = async (deps: Deps) => {
  const {
    http,
    databaseUrl,
    relations,
    accounts,
    access,
    takes,
    sessionsRepo,
    sessions,
    groupEvents,
    signIn,
    log,
    now
  } = deps
  const io = createIo(http)
  // Only the handshake carries the cookie; later packets of a polling transport need not read the sign-in again.
  for (const middleware of signIn) {
    io.engine.use((req: never, res: never, next: never) =>
      (req as { _query?: { sid?: string } })._query?.sid ? (next as () => void)() : middleware(req, res, next)
    )
  }
  io.use((socket, next) => {
    const request = socket.request as typeof socket.request & { user?: Actor; sessionID?: string }
    if (!request.user || !request.sessionID) return next(new Error('sign-in-needed'))
    socket.data.actor = request.user
    socket.data.sid = request.sessionID
    next()
  })

  const rooms = createRooms(io, relations)
  /** Nothing where the session went with its take. */
  const tellState = async (sessionId: string): Promise<void> => {
    const session = await sessions.find(sessionId)
    if (!session) return
    const { abilities: _, ...state } = session
    io.to(sessionRoom(sessionId)).emit('session:state', state)
  }
  const leaveFor = async (sessionId: string, userId: string): Promise<void> => {
    await sessions.leave({ id: userId, name: '', isOperator: false }, sessionId)
    await tellState(sessionId)
  }
  const presence = createPresence({ rooms, now, log, leave: leaveFor })

  const recheck = async (sockets: RoomSocket[]): Promise<void> => {
    for (const socket of sockets) {
      for (const sessionId of await rooms.evict(socket)) {
        presence.forget(sessionId, socket.data.actor.id)
        await leaveFor(sessionId, socket.data.actor.id)
      }
    }
  }
  /** Events that may take rights away; the sockets concerned are looked at before the event is sent on. */
  const beforeSend = async (event: GroupEvent): Promise<void> => {
    if ((event.type === 'person:left' || event.type === 'person:updated') && event.objectId)
      await recheck(rooms.socketsOf(event.objectId))
    if (event.type === 'take:updated' || event.type === 'take:removed' || event.type === 'link:changed') {
      await recheck(rooms.socketsIn(watchRoom(event.groupId)))
    }
    if (event.type === 'session:ended' && event.objectId) await tellState(event.objectId)
  }
  const dispatch = createDispatch({ rooms, events: groupEvents, log, beforeSend })

  const tellProgress = async (payload: string): Promise<void> => {
    const progress = JSON.parse(payload) as { takeId: string; stage: string; progress: number }
    const home = await takes.home(progress.takeId)
    if (!home) return
    for (const socket of rooms.socketsIn(groupRoom(home.groupId))) {
      const standing = await access.takeStanding(socket.data.actor.id, progress.takeId)
      if (standing && allows('take:read', takeRelations(standing))) socket.emit('take:progress', progress)
    }
  }
  const listener = createListener({
    databaseUrl,
    log,
    channels: {
      [eventChannel]: (groupId) => void dispatch.wake(groupId),
      [progressChannel]: (payload) =>
        void tellProgress(payload).catch((error: unknown) => log.error('session', 'progress was not told', error))
    },
    onConnected: () => dispatch.wakeAll()
  })

  const isSignedIn = async (sid: string): Promise<boolean> => (await accounts.livingSignIns([sid])).has(sid)
  const handlers = createEventHandlers({ io, sessions, dispatch, presence, now })
  io.on('connection', (socket) => {
    attach(socket, handlers, { relations, log, now, isSignedIn })
  })

  /** Closes sockets whose sign-in ended or whose account was disabled (ASVS V7.4.1, V7.4.2). */
  const closeEnded = async (): Promise<void> => {
    const sockets = [...io.sockets.sockets.values()]
    if (sockets.length === 0) return
    const living = await accounts.livingSignIns([...new Set(sockets.map((socket) => socket.data.sid))])
    for (const socket of sockets) {
      if (living.has(socket.data.sid)) continue
      socket.emit('signIn:ended', {})
      socket.disconnect(true)
    }
  }
  const timer = setInterval(() => {
    Promise.all([closeEnded(), presence.sweep()]).catch((error: unknown) =>
      log.error('session', 'the sweep of sockets failed', error)
    )
  }, sweepEveryMs)

  // Whoever was here when the server went down has the grace time to come back.
  for (const { sessionId, userId } of await sessionsRepo.here()) presence.touch(sessionId, userId)
  await listener.start()

  return {
    io,
    close: async (): Promise<void> => {
      clearInterval(timer)
      await listener.close()
      await io.close()
    }
  }
}
export type Realtime = Awaited<ReturnType<typeof startRealtime>>
