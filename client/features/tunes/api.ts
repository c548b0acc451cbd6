import { useQueryClient } from '@tanstack/react-query'
import { tuneRoutes } from '@shared/contracts/tunes'
import { routeKey, useRouteMutation, useRouteQuery } from '@client/lib/query'

export const useTunes = (groupId: string) => useRouteQuery(tuneRoutes.list, { params: { groupId } })
export const useTune = (tuneId: string) => useRouteQuery(tuneRoutes.get, { params: { tuneId } })

const useStaleTunes = () => {
  const client = useQueryClient()
  return (): void => {
    for (const def of [tuneRoutes.list, tuneRoutes.get]) void client.invalidateQueries({ queryKey: routeKey(def) })
  }
}

export const useCreateTune = () => useRouteMutation(tuneRoutes.create, { onSuccess: useStaleTunes() })
export const useRenameTune = () => useRouteMutation(tuneRoutes.update, { onSuccess: useStaleTunes() })
export const useRemoveTune = () => useRouteMutation(tuneRoutes.remove, { onSuccess: useStaleTunes() })
