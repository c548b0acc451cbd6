import { sessionRoutes } from '@shared/contracts/sessions'
import { useRouteMutation, useRouteQuery } from '@client/lib/query'

export const useLiveSessions = (groupId: string | null) =>
  useRouteQuery(sessionRoutes.live, { params: { groupId: groupId ?? '' } }, { enabled: groupId !== null })
export const useStartSession = () => useRouteMutation(sessionRoutes.start)
export const useEndSession = () => useRouteMutation(sessionRoutes.end)
