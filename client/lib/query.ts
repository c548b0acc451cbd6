// TanStack Query over contract routes. A query's key is [route path, request] and is made nowhere else.
import {
  QueryClient,
  useMutation,
  type UseMutationOptions,
  type UseMutationResult,
  useQuery,
  type UseQueryOptions,
  type UseQueryResult
} from '@tanstack/react-query'
import type { RequestOf, ResponseOf, RouteDef } from '@shared/contracts/route'
import { ApiProblem, callRoute } from '@client/lib/api'

export const routeKey = <D extends RouteDef>(def: D, request?: RequestOf<D>): readonly unknown[] =>
  request ? [def.path, request] : [def.path]

const isPassing = (error: unknown): boolean =>
  error instanceof ApiProblem && (error.code === 'offline' || error.code === 'unavailable')

export const createQueryClient = (): QueryClient =>
  new QueryClient({
    defaultOptions: {
      queries: {
        staleTime: 30_000,
        // What was refused is refused again; only trouble on the way is worth another try.
        retry: (count, error) => isPassing(error) && count < 6,
        retryDelay: (count) => Math.min(500 * 2 ** count, 8000),
        refetchOnWindowFocus: false
      },
      // A repeated create carries the same id, so that trying again is harmless.
      mutations: {
        retry: (count, error) => isPassing(error) && count < 6,
        retryDelay: (count) => Math.min(500 * 2 ** count, 8000),
        networkMode: 'always'
      }
    }
  })

export const useRouteQuery = <D extends RouteDef>(
  def: D,
  request: RequestOf<D>,
  options: Omit<UseQueryOptions<ResponseOf<D>, ApiProblem>, 'queryKey' | 'queryFn'> = {}
): UseQueryResult<ResponseOf<D>, ApiProblem> =>
  useQuery<ResponseOf<D>, ApiProblem>({
    queryKey: routeKey(def, request),
    queryFn: ({ signal }) => callRoute(def, request, signal),
    ...options
  })

export const useRouteMutation = <D extends RouteDef>(
  def: D,
  options: Omit<UseMutationOptions<ResponseOf<D>, ApiProblem, RequestOf<D>>, 'mutationFn'> = {}
): UseMutationResult<ResponseOf<D>, ApiProblem, RequestOf<D>> =>
  useMutation<ResponseOf<D>, ApiProblem, RequestOf<D>>({ mutationFn: (request) => callRoute(def, request), ...options })
