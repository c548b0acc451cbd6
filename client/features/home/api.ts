import { useQueries } from '@tanstack/react-query'
import { commentRoutes, type Comment } from '@shared/contracts/comments'
import { groupRoutes, type Group } from '@shared/contracts/groups'
import { sessionRoutes, type Session } from '@shared/contracts/sessions'
import { takeRoutes, type Take } from '@shared/contracts/takes'
import { callRoute } from '@client/lib/api'
import { routeKey, useRouteQuery } from '@client/lib/query'

export const useMyGroups = (isSignedIn = true) => useRouteQuery(groupRoutes.list, {}, { enabled: isSignedIn })

/** The newest takes of each group, in one list. */
export const useNewestTakes = (groups: readonly Group[]): Take[] =>
  useQueries({
    queries: groups.map(({ id }) => {
      const request = { params: { groupId: id } }
      return {
        queryKey: routeKey(takeRoutes.list, request),
        queryFn: ({ signal }: { signal: AbortSignal }) => callRoute(takeRoutes.list, request, signal)
      }
    }),
    combine: (answers) => answers.flatMap(({ data }) => data?.items ?? [])
  })

export const useSessionsNow = (groups: readonly Group[]): Session[] =>
  useQueries({
    queries: groups.map(({ id }) => {
      const request = { params: { groupId: id } }
      return {
        queryKey: routeKey(sessionRoutes.live, request),
        queryFn: ({ signal }: { signal: AbortSignal }) => callRoute(sessionRoutes.live, request, signal)
      }
    }),
    combine: (answers) => answers.flatMap(({ data }) => data?.items ?? [])
  })

export const useCommentsOn = (takes: readonly Take[]): Comment[] =>
  useQueries({
    queries: takes.map(({ id }) => {
      const request = { params: { takeId: id } }
      return {
        queryKey: routeKey(commentRoutes.list, request),
        queryFn: ({ signal }: { signal: AbortSignal }) => callRoute(commentRoutes.list, request, signal)
      }
    }),
    combine: (answers) => answers.flatMap(({ data }) => data?.items ?? [])
  })
