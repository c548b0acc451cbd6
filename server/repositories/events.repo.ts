// What happened in a group, numbered without gaps: the number is taken under the group's row lock, so that nobody can
// read number n+1 before n is there.
import type { GroupEvent, GroupEventType } from '@shared/contracts/group-events'
import type { Db } from '@server/db/knex'
import type { EventRow } from '@server/db/tables'

export const eventChannel = 'plumbline_events'

export interface NewEvent {
  groupId: string
  type: GroupEventType
  objectId?: string | null
  takeId?: string | null
  actorId?: string | null
}

export const toGroupEvent = (row: EventRow): GroupEvent => ({
  groupId: row.group_id,
  seq: row.seq,
  type: row.type,
  objectId: row.object_id,
  takeId: row.take_id,
  actorId: row.actor_id,
  at: row.created_at.toISOString()
})

export const createEventsRepo = (db: Db) => ({
  /** Adds an event inside the transaction of the change it tells of. Listeners wake when that commits. */
  add: async (event: NewEvent, trx: Db): Promise<void> => {
    const [group] = await trx('groups').where({ id: event.groupId }).increment('last_seq', 1).returning('last_seq')
    if (!group) return
    await trx('events').insert({
      group_id: event.groupId,
      seq: group.last_seq,
      type: event.type,
      object_id: event.objectId ?? null,
      take_id: event.takeId ?? null,
      actor_id: event.actorId ?? null
    })
    await trx.raw('select pg_notify(?, ?)', [eventChannel, event.groupId])
  },
  after: async (groupId: string, seq: number, limit: number): Promise<GroupEvent[]> => {
    const rows = await db('events')
      .where('group_id', groupId)
      .andWhere('seq', '>', seq)
      .orderBy('seq')
      .limit(limit)
      .select('group_id', 'seq', 'type', 'object_id', 'take_id', 'actor_id', 'created_at')
    return rows.map(toGroupEvent)
  },
  lastSeq: async (groupId: string): Promise<number> => {
    const row = await db('groups').where({ id: groupId }).first('last_seq')
    return row?.last_seq ?? 0
  }
})
export type EventsRepo = ReturnType<typeof createEventsRepo>
