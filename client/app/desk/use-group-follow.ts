import { useQueryClient } from '@tanstack/react-query'
import { followGroup } from '@client/lib/group-events'
import { useScope } from '@client/lib/scope'

/** Keeps what is on the screen in step with what others do in the group. */
export const useGroupFollow = (groupId: string): void => {
  const client = useQueryClient()
  useScope((scope) => void scope.add(followGroup({ client, groupId }).dispose), [client, groupId])
}
