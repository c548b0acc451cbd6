import { useGroupFollow } from '@client/app/desk/use-group-follow'

/** Keeps the lists of one group live while it is on the page; shows nothing. */
export function FollowGroup({ groupId }: { groupId: string }) {
  useGroupFollow(groupId)
  return null
}
