// What each socket event does: rooms and broadcasts here, rules in the services.
import type { Session } from '@shared/contracts/sessions'
import { problem } from '@shared/errors/problems'
import type { Actor } from '@server/http/handlers'
import type { Dispatch } from '@server/realtime/dispatch'
import type { Presence } from '@server/realtime/presence'
import { groupRoom, sessionRoom, watchRoom } from '@server/realtime/rooms'
import type { EventHandlers, Io } from '@server/realtime/socket'
import type { SessionService } from '@server/services/sessions.service'

interface Deps {
  io: Io
  sessions: SessionService
  dispatch: Dispatch
  presence: Presence
  now(): number
}

export const createEventHandlers = ({ io, sessions, dispatch, presence, now }: Deps): EventHandlers => {
  const tellState = (session: Session): void => {
    const { abilities: _, ...state } = session
    io.to(sessionRoom(session.id)).emit('session:state', state)
  }
  const tellStateOf = async (sessionId: string): Promise<void> => tellState(await sessions.get(sessionId, new Set()))

  return {
    'group:follow': async ({ socket, payload }) => {
      await socket.join(groupRoom(payload.groupId))
      return { lastSeq: await dispatch.follow(payload.groupId) }
    },
    'group:unfollow': async ({ socket, payload }) => {
      await socket.leave(groupRoom(payload.groupId))
      return {}
    },
    'clock:ask': async () => ({ serverMs: now() }),
    'session:join': async ({ socket, actor, relations, payload }) => {
      const session = await sessions.join(actor, relations, payload.sessionId)
      await socket.join([sessionRoom(session.id), watchRoom(session.groupId)])
      await dispatch.follow(session.groupId)
      presence.touch(session.id, actor.id)
      tellState(session)
      return session
    },
    'session:leave': async ({ socket, actor, payload }) => {
      await socket.leave(sessionRoom(payload.sessionId))
      if (!presence.hasSocket(payload.sessionId, actor.id)) await leaveSession(actor, payload.sessionId)
      return {}
    },
    'session:step': async ({ actor, payload }) => {
      await sessions.step(actor, payload.sessionId, payload.isAway)
      await tellStateOf(payload.sessionId)
      return {}
    },
    'session:lead': async ({ actor, relations, payload }) => {
      const session = await sessions.lead(actor, relations, payload.sessionId, payload.leaderId)
      tellState(session)
      return session
    },
    'transport:change': async ({ actor, payload }) => {
      const { sessionId, ...change } = payload
      const transport = await sessions.change(actor, sessionId, change)
      io.to(sessionRoom(sessionId)).emit('transport:state', { ...transport, sessionId })
      return transport
    },
    'pointer:show': async ({ socket, actor, payload }) => {
      if (!socket.rooms.has(sessionRoom(payload.sessionId)))
        throw problem('not-ready', { detail: 'Join the session first.' })
      socket.to(sessionRoom(payload.sessionId)).volatile.emit('pointer:shown', { ...payload, personId: actor.id })
      return {}
    }
  }

  async function leaveSession(actor: Actor, sessionId: string): Promise<void> {
    presence.forget(sessionId, actor.id)
    await sessions.leave(actor, sessionId)
    await tellStateOf(sessionId)
  }
}
