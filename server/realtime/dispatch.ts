// Sends what was committed to those who follow it, in the group's order, each as they may know it.
import type { GroupEvent } from '@shared/contracts/group-events'
import type { Logger } from '@server/logger'
import type { Rooms } from '@server/realtime/rooms'
import { groupRoom, watchRoom } from '@server/realtime/rooms'
import type { GroupEventService } from '@server/services/group-events.service'

interface Deps {
  rooms: Rooms
  events: GroupEventService
  log: Logger
  /** Called with every event once, before it is sent: rights may have changed with it. */
  beforeSend(event: GroupEvent): Promise<void>
}

export const createDispatch = ({ rooms, events, log, beforeSend }: Deps) => {
  /** The last number sent to a group's followers. */
  const sent = new Map<string, number>()
  const running = new Map<string, Promise<void>>()

  const drain = async (groupId: string): Promise<void> => {
    for (;;) {
      const after = sent.get(groupId)
      if (after === undefined) return
      const batch = await events.after(groupId, after)
      const last = batch.at(-1)
      if (!last) return
      for (const event of batch) await beforeSend(event)
      const sockets = rooms.socketsIn(groupRoom(groupId))
      const people = new Set(sockets.map((socket) => socket.data.actor.id))
      for (const userId of people) {
        const seen = await events.asSeenBy(userId, batch)
        for (const socket of sockets) {
          if (socket.data.actor.id === userId) for (const event of seen) socket.emit('group:event', event)
        }
      }
      sent.set(groupId, last.seq)
      if (sockets.length === 0 && rooms.socketsIn(watchRoom(groupId)).length === 0) sent.delete(groupId)
    }
  }
  /** One at a time for a group; a wake-up during a run makes it look once more. */
  const wake = (groupId: string): Promise<void> => {
    const next = (running.get(groupId) ?? Promise.resolve())
      .then(() => drain(groupId))
      .catch((error: unknown) => log.error('session', 'events were not sent', error))
    running.set(groupId, next)
    void next.then(() => {
      if (running.get(groupId) === next) running.delete(groupId)
    })
    return next
  }

  return {
    wake,
    wakeAll: (): void => {
      for (const groupId of rooms.followedGroups()) void wake(groupId)
    },
    /** Call when a socket has joined the group's room; the number it may count on being sent everything after. */
    follow: async (groupId: string): Promise<number> => {
      const lastSeq = await events.lastSeq(groupId)
      if (!sent.has(groupId)) sent.set(groupId, lastSeq)
      void wake(groupId)
      return Math.min(lastSeq, sent.get(groupId) ?? lastSeq)
    }
  }
}
export type Dispatch = ReturnType<typeof createDispatch>
