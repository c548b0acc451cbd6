// Passages of a take as files: each person sees their own.
import { useQueryClient } from '@tanstack/react-query'
import { type Clip, clipRoutes, type ClipSettings } from '@shared/contracts/clips'
import { addressOf } from '@shared/contracts/route'
import { limits } from '@shared/limits'
import type { ApiProblem } from '@client/lib/api'
import { freshId } from '@client/lib/ids'
import { routeKey, useRouteMutation, useRouteQuery } from '@client/lib/query'

const isBeingMade = ({ state }: Clip): boolean => state === 'waiting' || state === 'working'
/** While a file is being made the list is asked for this often, ms. */
const lookEveryMs = 1000

export const useClips = (takeId: string) =>
  useRouteQuery(
    clipRoutes.list,
    { params: { takeId } },
    { refetchInterval: ({ state }) => (state.data?.items.some(isBeingMade) ? lookEveryMs : false) }
  )

/** Where the finished file is downloaded from. */
export const clipUrl = (clipId: string): string => addressOf(clipRoutes.file, { params: { clipId } })

export interface ClipActs {
  /** `place` is how the passage is called here. */
  make(settings: ClipSettings, place: string): void
  isAsking: boolean
  /** Stops making it, or deletes it. */
  remove(clipId: string): void
  /** What went wrong last, until something goes right. */
  fault: ApiProblem | null
}

export const useClipActs = (takeId: string): ClipActs => {
  const client = useQueryClient()
  const key = routeKey(clipRoutes.list, { params: { takeId } })
  const show = (update: (items: Clip[]) => Clip[]): void => {
    void client.cancelQueries({ queryKey: key })
    client.setQueryData<{ items: Clip[] }>(key, (list) => ({ items: update(list?.items ?? []) }))
  }
  const lookAgain = () => void client.invalidateQueries({ queryKey: key })
  const create = useRouteMutation(clipRoutes.create, {
    onSuccess: (clip) => show((items) => [clip, ...items.filter(({ id }) => id !== clip.id)]),
    onSettled: lookAgain
  })
  const removal = useRouteMutation(clipRoutes.remove, { onSettled: lookAgain })
  return {
    make: (settings, place) =>
      create.mutate({ params: { takeId }, body: { id: freshId(), place: place.slice(0, limits.title), settings } }),
    isAsking: create.isPending,
    remove: (clipId) => {
      show((items) => items.filter(({ id }) => id !== clipId))
      removal.mutate({ params: { clipId } })
    },
    // Gone already is as good as deleted.
    fault: create.error ?? (removal.error?.code === 'not-found' ? null : removal.error)
  }
}
