// What happens in a group, in its own order and without gaps, turned into queries that must be asked again.
// The sequence number never passes a gap: what is missing is fetched first (GET …/events?after=).
import type { QueryClient, QueryKey } from '@tanstack/react-query'
import { accountRoutes } from '@shared/contracts/account'
import { barMapRoutes } from '@shared/contracts/bar-maps'
import { commentRoutes } from '@shared/contracts/comments'
import { type GroupEvent, groupEventRoutes } from '@shared/contracts/group-events'
import { groupRoutes, invitationRoutes, linkRoutes } from '@shared/contracts/groups'
import { sessionRoutes } from '@shared/contracts/sessions'
import { takeRoutes } from '@shared/contracts/takes'
import { chartRoutes, tuneRoutes } from '@shared/contracts/tunes'
import { callRoute } from '@client/lib/api'
import { routeKey } from '@client/lib/query'
import { createScope, type Scope } from '@client/lib/scope'
import { ask, roomSocket } from '@client/lib/socket'

/** The queries that an event makes stale. */
export const staleKeys = ({ type, groupId, takeId, objectId }: GroupEvent): QueryKey[] => {
  const group = { params: { groupId } }
  const ofTake = takeId ? { params: { takeId } } : undefined
  const ofTune = objectId ? { params: { tuneId: objectId } } : undefined
  const lists = [routeKey(takeRoutes.list)]
  switch (type) {
    case 'hidden':
      return []
    case 'group:updated':
      return [routeKey(groupRoutes.list), routeKey(groupRoutes.get, group), routeKey(accountRoutes.me)]
    case 'person:joined':
    case 'person:updated':
    case 'person:left':
      return [
        routeKey(groupRoutes.people, group),
        routeKey(groupRoutes.get, group),
        routeKey(groupRoutes.list),
        // Whoever joined has used one up.
        routeKey(invitationRoutes.list, group),
        ...lists
      ]
    case 'invitation:changed':
      return [routeKey(invitationRoutes.list, group)]
    case 'link:changed':
      return [routeKey(linkRoutes.list, group), ...lists]
    case 'tune:created':
    case 'tune:updated':
    case 'tune:removed':
      return [routeKey(tuneRoutes.list, group), routeKey(tuneRoutes.get, ofTune), ...lists]
    case 'chart:edited':
      // The event names the chart's document, not its tune.
      return [routeKey(tuneRoutes.list, group), routeKey(tuneRoutes.get), routeKey(chartRoutes.get)]
    case 'take:created':
    case 'take:updated':
    case 'take:removed':
      return [...lists, routeKey(takeRoutes.get, ofTake)]
    case 'bar-map:edited':
      return [routeKey(barMapRoutes.get, ofTake)]
    case 'comment:created':
    case 'comment:updated':
    case 'comment:removed':
      return [routeKey(commentRoutes.list, ofTake), ...lists]
    case 'session:started':
    case 'session:ended':
      return [routeKey(sessionRoutes.live, group)]
  }
}

/** How many on the page follow each group. */
const followers = new Map<string, number>()
let turn: Promise<unknown> = Promise.resolve()

/** Follows and unfollows wait for the answer to the one before: the server may take them up in another order. */
const inTurn = <T>(work: () => Promise<T>): Promise<T> => {
  const done = turn.then(work)
  turn = done.catch(() => undefined)
  return done
}

interface Deps {
  client: QueryClient
  groupId: string
  /** Called with every event once, in order. */
  onEvent?: (event: GroupEvent) => void
}

/** Follows a group until the scope is disposed; survives lost connections and server restarts. */
export const followGroup = ({ client, groupId, onEvent }: Deps): Scope => {
  const scope = createScope()
  const socket = roomSocket()
  followers.set(groupId, (followers.get(groupId) ?? 0) + 1)
  /** Everything up to here has been taken in; null until the first follow. */
  let seen: number | null = null
  let isCatchingUp = false
  let isWanted = false
  let isOver = false
  scope.add(() => {
    isOver = true
  })

  const take = (event: GroupEvent): void => {
    seen = event.seq
    for (const queryKey of staleKeys(event)) void client.invalidateQueries({ queryKey })
    onEvent?.(event)
  }
  const catchUp = async (): Promise<void> => {
    if (isCatchingUp) {
      isWanted = true
      return
    }
    isCatchingUp = true
    try {
      do {
        isWanted = false
        for (;;) {
          const { items } = await callRoute(groupEventRoutes.list, {
            params: { groupId },
            query: { after: String(seen ?? 0) }
          })
          if (isOver || items.length === 0) break
          for (const event of items) if (event.seq > (seen ?? 0)) take(event)
        }
      } while (isWanted && !isOver)
    } catch {
      // The next event, or the next connection, tries again.
      scope.timeout(() => void catchUp(), 2000)
    } finally {
      isCatchingUp = false
    }
  }
  const follow = async (): Promise<void> => {
    try {
      const { lastSeq } = await inTurn(() => ask('group:follow', { groupId }))
      if (isOver) return
      if (seen === null) seen = lastSeq
      else if (lastSeq > seen) await catchUp()
    } catch {
      if (!isOver && socket.connected) scope.timeout(() => void follow(), 2000)
    }
  }
  const handleEvent = (event: GroupEvent): void => {
    if (event.groupId !== groupId || seen === null || event.seq <= seen) return
    if (event.seq === seen + 1 && !isCatchingUp) take(event)
    else void catchUp()
  }
  /** No longer let in: what was seen is put away, and what is on the screen is asked for again and refused. */
  const handleClosed = (closed: { groupId: string }): void => {
    if (closed.groupId !== groupId) return
    client.removeQueries({ type: 'inactive' })
    void client.invalidateQueries()
  }
  const handleConnect = (): void => void follow()
  socket.on('group:event', handleEvent)
  socket.on('group:closed', handleClosed)
  socket.on('connect', handleConnect)
  scope.add(() => {
    socket.off('group:event', handleEvent)
    socket.off('group:closed', handleClosed)
    socket.off('connect', handleConnect)
    followers.set(groupId, (followers.get(groupId) ?? 1) - 1)
    // Asked only when its turn comes: by then the next page may follow the same group.
    void inTurn(async () => {
      if (socket.connected && followers.get(groupId) === 0) await ask('group:unfollow', { groupId })
    }).catch(() => undefined)
  })
  if (socket.connected) void follow()
  else socket.connect()
  return scope
}
