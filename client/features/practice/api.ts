// What one person keeps for practising: loops on a take, and preferences.
import { useMemo } from 'react'
import { type QueryClient, useQueryClient } from '@tanstack/react-query'
import { preferenceRoutes } from '@shared/contracts/preferences'
import {
  type ChangeSavedLoop,
  type CreateSavedLoop,
  type SavedLoop,
  savedLoopRoutes
} from '@shared/contracts/saved-loops'
import { defaultPreferences, type PreferenceChange, type Preferences } from '@shared/practice/preferences'
import { ApiProblem, callRoute } from '@client/lib/api'
import { freshId } from '@client/lib/ids'
import { routeKey, useRouteMutation, useRouteQuery } from '@client/lib/query'
import { createScope, useScope } from '@client/lib/scope'
import { createPreferenceChanges, type PreferenceChanges } from './preference-changes'

/** What is kept when a loop is kept. */
export type LoopToKeep = Omit<CreateSavedLoop, 'id' | 'name'>

export const useSavedLoops = (takeId: string) => useRouteQuery(savedLoopRoutes.list, { params: { takeId } })

const inOrder = (items: SavedLoop[]): SavedLoop[] =>
  items.toSorted((a, b) => a.span.startSec - b.span.startSec || a.span.endSec - b.span.endSec)

export interface SavedLoopActs {
  /** The new loop's id. */
  keep(name: string, loop: LoopToKeep): string
  change(id: string, change: ChangeSavedLoop): void
  /** Gone from sight at once; the function given back brings it back. */
  remove(loop: SavedLoop): () => void
  /** What went wrong last, until something goes right. */
  fault: ApiProblem | null
}

/** Everything shows at once and goes back when the server refuses. */
export const useSavedLoopActs = (takeId: string): SavedLoopActs => {
  const client = useQueryClient()
  const key = useMemo(() => routeKey(savedLoopRoutes.list, { params: { takeId } }), [takeId])
  const show = (update: (items: SavedLoop[]) => SavedLoop[]): void => {
    void client.cancelQueries({ queryKey: key })
    client.setQueryData<{ items: SavedLoop[] }>(key, (list) => list && { items: inOrder(update(list.items)) })
  }
  const mutationKey = ['saved loops', takeId]
  const settle = {
    mutationKey,
    // One after the other: bringing back never overtakes the deletion.
    scope: { id: mutationKey.join(' ') },
    // What is shown stands until nothing newer is on its way.
    onSettled: () => {
      if (client.isMutating({ mutationKey }) === 1) void client.invalidateQueries({ queryKey: key })
    }
  }
  const create = useRouteMutation(savedLoopRoutes.create, settle)
  const update = useRouteMutation(savedLoopRoutes.change, settle)
  const removal = useRouteMutation(savedLoopRoutes.remove, settle)

  const put = (loop: SavedLoop): void => {
    show((items) => [...items.filter(({ id }) => id !== loop.id), loop])
    const { id, name, span, rate, ladder, restBeats } = loop
    create.mutate({ params: { takeId }, body: { id, name, span, rate, ladder, restBeats } })
  }
  return {
    keep: (name, loop) => {
      const id = freshId()
      const now = new Date().toISOString()
      put({ ...loop, id, name, takeId, createdAt: now, updatedAt: now })
      return id
    },
    change: (savedLoopId, change) => {
      const given = Object.fromEntries(Object.entries(change).filter(([, value]) => value !== undefined))
      show((items) => items.map((loop) => (loop.id === savedLoopId ? { ...loop, ...given } : loop)))
      update.mutate({ params: { savedLoopId }, body: change })
    },
    remove: (loop) => {
      show((items) => items.filter(({ id }) => id !== loop.id))
      removal.mutate({ params: { savedLoopId: loop.id } })
      return () => put(loop)
    },
    fault: create.error ?? update.error ?? removal.error
  }
}

const preferencesKey = routeKey(preferenceRoutes.get, {})

// Outlives the component that made a change, so that leaving the desk loses none.
const known = new WeakMap<QueryClient, PreferenceChanges>()

const changesFor = (client: QueryClient): PreferenceChanges => {
  const before = known.get(client)
  if (before) return before
  const timers = createScope()
  const changes = createPreferenceChanges({
    send: (body) => callRoute(preferenceRoutes.change, { body }),
    show: (update) => {
      void client.cancelQueries({ queryKey: preferencesKey })
      client.setQueryData<Preferences>(preferencesKey, (shown) => update(shown ?? null) ?? undefined)
    },
    isPassing: (error) => error instanceof ApiProblem && (error.code === 'offline' || error.code === 'unavailable'),
    reload: () => void client.invalidateQueries({ queryKey: preferencesKey }),
    later: (run, ms) => timers.timeout(run, ms)
  })
  const cache = client.getQueryCache()
  cache.subscribe(({ type, query }) => {
    // Signing in or out empties the cache.
    if (type === 'removed' && query.queryKey[0] === preferencesKey[0]) changes.drop()
  })
  known.set(client, changes)
  return changes
}

export interface KnownPreferences {
  /** Defaults stand wherever nothing was chosen. */
  preferences: Required<Preferences>
  /** False until the server has told them: no sound louder than the last one should start before. */
  isKnown: boolean
}

/** `isSignedIn` false asks nobody and gives the defaults. */
export const usePreferences = (isSignedIn = true): KnownPreferences => {
  const { data } = useRouteQuery(preferenceRoutes.get, {}, { staleTime: 5 * 60_000, enabled: isSignedIn })
  return useMemo(() => ({ preferences: { ...defaultPreferences, ...data }, isKnown: data !== undefined }), [data])
}

/** Seen at once, sent a moment later; null goes back to the default. The same function all along. */
export const useChangePreferences = (): ((change: PreferenceChange) => void) => {
  const client = useQueryClient()
  useScope(
    (scope) => {
      const flush = () => changesFor(client).flush()
      scope.listen(document, 'visibilitychange', () => {
        if (document.visibilityState === 'hidden') flush()
      })
      scope.listen(window, 'pagehide', flush)
    },
    [client]
  )
  return changesFor(client).change
}
