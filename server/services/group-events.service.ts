// What happened in a group, as one person may know it: the number always, the rest only where they may hear the take.
import type { GroupEvent } from '@shared/contracts/group-events'
import { abilitiesOn } from '@shared/access/permissions'
import { takeRelations } from '@server/access/take-relations'
import type { AccessRepo } from '@server/repositories/access.repo'
import type { EventsRepo } from '@server/repositories/events.repo'

export const eventsPerAnswer = 500

interface Deps {
  events: EventsRepo
  access: Pick<AccessRepo, 'takeStandings'>
}

export const createGroupEventService = ({ events, access }: Deps) => {
  const asSeenBy = async (userId: string, all: GroupEvent[]): Promise<GroupEvent[]> => {
    const takeIds = [...new Set(all.flatMap((event) => (event.takeId ? [event.takeId] : [])))]
    if (takeIds.length === 0) return all
    const standings = await access.takeStandings(userId, takeIds)
    const isHidden = (event: GroupEvent): boolean => {
      // A take that is gone cannot be asked about; that it is gone is for everybody.
      if (!event.takeId || event.type === 'take:removed') return false
      const standing = standings.get(event.takeId)
      if (!standing) return true
      const abilities = abilitiesOn('take', takeRelations(standing))
      // Owners see cards of what they may not hear, so they hear that the cards changed.
      const isCard = event.type === 'take:created' || event.type === 'take:updated'
      return !(abilities.includes('take:read') || (isCard && abilities.includes('take:delete')))
    }
    return all.map((event) =>
      isHidden(event) ? { ...event, type: 'hidden', objectId: null, takeId: null, actorId: null } : event
    )
  }
  return {
    asSeenBy,
    list: async (userId: string, groupId: string, after: number): Promise<{ items: GroupEvent[]; lastSeq: number }> => {
      const items = await asSeenBy(userId, await events.after(groupId, after, eventsPerAnswer))
      return { items, lastSeq: await events.lastSeq(groupId) }
    },
    lastSeq: (groupId: string) => events.lastSeq(groupId),
    after: (groupId: string, seq: number) => events.after(groupId, seq, eventsPerAnswer)
  }
}
export type GroupEventService = ReturnType<typeof createGroupEventService>
