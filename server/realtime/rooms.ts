// Which sockets follow what, and taking them out when rights are lost.
import { denial, type Permission } from '@shared/access/permissions'
import type { Relations } from '@server/access/relations'
import type { Io, RoomSocket } from '@server/realtime/socket'

export const groupRoom = (groupId: string): string => `group:${groupId}`
/** Sockets in a session of the group: events are looked at for their sake too, whether they follow the group or not. */
export const watchRoom = (groupId: string): string => `watch:${groupId}`
export const sessionRoom = (sessionId: string): string => `session:${sessionId}`
const idOf = (room: string, prefix: string): string | null =>
  room.startsWith(prefix) ? room.slice(prefix.length) : null

export const createRooms = (io: Io, relations: Relations) => {
  const socketsIn = (room: string): RoomSocket[] =>
    [...(io.sockets.adapter.rooms.get(room) ?? [])].flatMap((id) => io.sockets.sockets.get(id) ?? [])

  const may = async (socket: RoomSocket, permission: Permission, ids: Record<string, string>): Promise<boolean> =>
    denial(permission, await relations.of(socket.data.actor, permission, ids)) === null

  return {
    socketsIn,
    socketsOf: (userId: string): RoomSocket[] =>
      [...io.sockets.sockets.values()].filter((socket) => socket.data.actor.id === userId),
    followedGroups: (): string[] => [
      ...new Set(
        [...io.sockets.adapter.rooms.keys()].flatMap((room) => idOf(room, 'group:') ?? idOf(room, 'watch:') ?? [])
      )
    ],
    /** Takes a socket out of every room whose right it has lost. Returns the sessions it was taken out of. */
    evict: async (socket: RoomSocket): Promise<string[]> => {
      const left: string[] = []
      for (const room of socket.rooms) {
        const groupId = idOf(room, 'group:')
        if (groupId && !(await may(socket, 'group:events', { groupId }))) {
          socket.leave(room)
          socket.emit('group:closed', { groupId })
        }
        const sessionId = idOf(room, 'session:')
        if (sessionId && !(await may(socket, 'session:join', { sessionId }))) {
          socket.leave(room)
          left.push(sessionId)
        }
      }
      return left
    }
  }
}
export type Rooms = ReturnType<typeof createRooms>
