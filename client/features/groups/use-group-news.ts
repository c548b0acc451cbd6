import { useQueryClient } from '@tanstack/react-query'
import { followGroup } from '@client/lib/group-events'
import { useScope } from '@client/lib/scope'

/** Keeps the page of a group live: what changes there is asked for again. Once on a page. */
export const useGroupNews = (groupId: string): void => {
  const client = useQueryClient()
  useScope((scope) => void scope.add(followGroup({ client, groupId }).dispose), [client, groupId])
}
