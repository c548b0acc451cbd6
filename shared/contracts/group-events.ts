import { z } from 'zod'
import { digits, Instant, Uuid } from '@shared/contracts/common'
import { defineRoute } from '@shared/contracts/route'

/** What happened in a group, in one order for everybody. */
export const groupEventTypes = [
  'hidden',
  'group:updated',
  'person:joined',
  'person:updated',
  'person:left',
  'invitation:changed',
  'link:changed',
  'tune:created',
  'tune:updated',
  'tune:removed',
  'chart:edited',
  'take:created',
  'take:updated',
  'take:removed',
  'bar-map:edited',
  'comment:created',
  'comment:updated',
  'comment:removed',
  'session:started',
  'session:ended'
] as const

export const GroupEvent = z.object({
  groupId: Uuid,
  seq: z.number().int(),
  /** `hidden`: something the asker may not know of; it still has its number, so that no gap is seen. */
  type: z.enum(groupEventTypes),
  objectId: Uuid.nullable(),
  takeId: Uuid.nullable(),
  actorId: Uuid.nullable(),
  at: Instant
})
export type GroupEvent = z.infer<typeof GroupEvent>
export type GroupEventType = (typeof groupEventTypes)[number]

export const groupEventRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/groups/:groupId/events',
    access: 'group:events',
    summary: 'What happened after a sequence number, without gaps',
    params: z.object({ groupId: Uuid }),
    query: z.object({ after: digits }),
    response: z.object({ items: z.array(GroupEvent), lastSeq: z.number().int() })
  })
}
