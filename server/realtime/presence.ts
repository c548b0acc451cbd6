// Who is in which session. A lost connection is forgiven for a while, so that a tunnel or a server restart changes nothing.
import type { Logger } from '@server/logger'
import type { Rooms } from '@server/realtime/rooms'
import { sessionRoom } from '@server/realtime/rooms'

export const graceMs = 10_000

interface Deps {
  rooms: Rooms
  now(): number
  log: Logger
  /** Ends somebody's presence for good and tells the others. */
  leave(sessionId: string, userId: string): Promise<void>
}

export const createPresence = ({ rooms, now, log, leave }: Deps) => {
  /** When each person of each session was last seen with a socket. */
  const seen = new Map<string, Map<string, number>>()
  const touch = (sessionId: string, userId: string): void => {
    const people = seen.get(sessionId) ?? new Map<string, number>()
    people.set(userId, now())
    seen.set(sessionId, people)
  }
  const forget = (sessionId: string, userId: string): void => {
    const people = seen.get(sessionId)
    people?.delete(userId)
    if (people?.size === 0) seen.delete(sessionId)
  }
  return {
    touch,
    forget,
    hasSocket: (sessionId: string, userId: string): boolean =>
      rooms.socketsIn(sessionRoom(sessionId)).some((socket) => socket.data.actor.id === userId),
    /** Whoever has had no socket for the grace time is taken as gone. */
    sweep: async (): Promise<void> => {
      for (const [sessionId, people] of seen) {
        const here = new Set(rooms.socketsIn(sessionRoom(sessionId)).map((socket) => socket.data.actor.id))
        for (const [userId, at] of people) {
          if (here.has(userId)) people.set(userId, now())
          else if (now() - at > graceMs) {
            forget(sessionId, userId)
            await leave(sessionId, userId).catch((error: unknown) =>
              log.error('session', 'leaving was not kept', error)
            )
          }
        }
      }
    }
  }
}
export type Presence = ReturnType<typeof createPresence>
