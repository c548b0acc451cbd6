import { useQueryClient } from '@tanstack/react-query'
import { addressOf } from '@shared/contracts/route'
import { takeRoutes, type Take } from '@shared/contracts/takes'
import { routeKey, useRouteMutation, useRouteQuery } from '@client/lib/query'
import { useScope } from '@client/lib/scope'
import { roomSocket } from '@client/lib/socket'

export const takeKey = (takeId: string) => routeKey(takeRoutes.get, { params: { takeId } })

/** Where the sound of a take comes from. */
export const audioUrl = (takeId: string): string => addressOf(takeRoutes.audio, { params: { takeId } })

/** Where the manifest of its pieces is. */
export const piecesUrl = (takeId: string): string => addressOf(takeRoutes.pieces, { params: { takeId } })

/** While it is being read the answer is asked for again now and then, should the socket be cut. */
const readingPollMs = 5000
const isBeingRead = (take: Take | undefined): boolean => take?.state === 'waiting' || take?.state === 'working'

export const useTake = (takeId: string) =>
  useRouteQuery(
    takeRoutes.get,
    { params: { takeId } },
    { refetchInterval: ({ state }) => (isBeingRead(state.data) ? readingPollMs : false) }
  )

/** Stage and percentage as the worker tells them. */
export const useTakeProgress = (takeId: string): void => {
  const client = useQueryClient()
  useScope(
    (scope) => {
      const socket = roomSocket()
      const handleProgress = (told: { takeId: string; stage: string; progress: number }): void => {
        if (told.takeId !== takeId) return
        client.setQueryData<Take>(takeKey(takeId), (take) =>
          take && isBeingRead(take) ? { ...take, state: 'working', stage: told.stage, progress: told.progress } : take
        )
      }
      socket.on('take:progress', handleProgress)
      scope.add(() => socket.off('take:progress', handleProgress))
    },
    [client, takeId]
  )
}

const useTakeInCache = () => {
  const client = useQueryClient()
  return (take: Take): void => {
    client.setQueryData(takeKey(take.id), take)
    void client.invalidateQueries({ queryKey: routeKey(takeRoutes.list) })
  }
}

export const useUpdateTake = () => {
  const keep = useTakeInCache()
  return useRouteMutation(takeRoutes.update, { onSuccess: keep })
}
export const useRetryTake = () => {
  const keep = useTakeInCache()
  return useRouteMutation(takeRoutes.retry, { onSuccess: keep })
}
export const useRemoveTake = () => {
  const client = useQueryClient()
  return useRouteMutation(takeRoutes.remove, {
    onSuccess: () => void client.invalidateQueries({ queryKey: routeKey(takeRoutes.list) })
  })
}
