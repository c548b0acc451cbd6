import { type QueryKey, useQueryClient } from '@tanstack/react-query'
import { accountRoutes } from '@shared/contracts/account'
import { groupRoutes, invitationRoutes, linkRoutes } from '@shared/contracts/groups'
import { sessionRoutes } from '@shared/contracts/sessions'
import { takeRoutes } from '@shared/contracts/takes'
import { tuneRoutes } from '@shared/contracts/tunes'
import { routeKey, useRouteMutation, useRouteQuery } from '@client/lib/query'

export const useGroup = (groupId: string) => useRouteQuery(groupRoutes.get, { params: { groupId } })
export const usePeople = (groupId: string) => useRouteQuery(groupRoutes.people, { params: { groupId } })
export const useLinks = (groupId: string) => useRouteQuery(linkRoutes.list, { params: { groupId } })
export const useInvitations = (groupId: string) => useRouteQuery(invitationRoutes.list, { params: { groupId } })
export const useGroupTunes = (groupId: string) => useRouteQuery(tuneRoutes.list, { params: { groupId } })
export const useGroupTakes = (groupId: string, cursor?: string) =>
  useRouteQuery(takeRoutes.list, { params: { groupId }, ...(cursor ? { query: { cursor } } : {}) })
export const useLiveSessions = (groupId: string) => useRouteQuery(sessionRoutes.live, { params: { groupId } })
/** The token goes in the body; asked for once, since a link that was used meanwhile is said so when joining. */
export const useInvited = (token: string) =>
  useRouteQuery(invitationRoutes.look, { body: { token } }, { staleTime: Infinity, enabled: token !== '' })

/** Asks these again at once, should the group's own news be cut off. */
const useStale = () => {
  const client = useQueryClient()
  return (...keys: QueryKey[]) =>
    () =>
      void Promise.all(keys.map((queryKey) => client.invalidateQueries({ queryKey })))
}
const meKey = routeKey(accountRoutes.me)
const groupKeys = [meKey, routeKey(groupRoutes.list), routeKey(groupRoutes.get)]

export const useStartGroup = () => {
  const stale = useStale()
  return useRouteMutation(groupRoutes.create, { onSuccess: stale(...groupKeys) })
}
export const useUpdateGroup = () => {
  const stale = useStale()
  return useRouteMutation(groupRoutes.update, { onSuccess: stale(...groupKeys) })
}
export const useSetRole = () => {
  const stale = useStale()
  return useRouteMutation(groupRoutes.setRole, { onSuccess: stale(routeKey(groupRoutes.people), ...groupKeys) })
}
export const useRemovePerson = () => {
  const stale = useStale()
  return useRouteMutation(groupRoutes.removePerson, {
    onSuccess: stale(routeKey(groupRoutes.people), routeKey(linkRoutes.list))
  })
}
export const useLeaveGroup = () => {
  const stale = useStale()
  return useRouteMutation(groupRoutes.leave, { onSuccess: stale(meKey, routeKey(groupRoutes.list)) })
}
export const useInvite = () => {
  const stale = useStale()
  return useRouteMutation(invitationRoutes.create, { onSuccess: stale(routeKey(invitationRoutes.list)) })
}
export const useRevokeInvitation = () => {
  const stale = useStale()
  return useRouteMutation(invitationRoutes.revoke, { onSettled: stale(routeKey(invitationRoutes.list)) })
}
export const useJoin = () => {
  const stale = useStale()
  return useRouteMutation(invitationRoutes.accept, { onSuccess: stale(...groupKeys) })
}
const linkKeys = [routeKey(linkRoutes.list), routeKey(groupRoutes.people), routeKey(takeRoutes.list)]
export const useAskForLink = () => {
  const stale = useStale()
  return useRouteMutation(linkRoutes.create, { onSuccess: stale(...linkKeys) })
}
export const useAgreeToLink = () => {
  const stale = useStale()
  return useRouteMutation(linkRoutes.agree, { onSuccess: stale(...linkKeys) })
}
export const useEndLink = () => {
  const stale = useStale()
  return useRouteMutation(linkRoutes.end, { onSuccess: stale(...linkKeys) })
}
export const useDeleteTake = () => {
  const stale = useStale()
  return useRouteMutation(takeRoutes.remove, { onSuccess: stale(routeKey(takeRoutes.list)) })
}
