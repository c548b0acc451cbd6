import type { SessionPerson, TransportState } from '@shared/contracts/sessions'
import type { Person } from '@shared/contracts/common'
import type { Db } from '@server/db/knex'
import { person } from '@server/repositories/people'

export interface StoredSession {
  id: string
  groupId: string
  takeId: string
  takeTitle: string
  takeDurationSec: number
  startedBy: Person
  leaderId: string | null
  startedAt: string
  endedAt: string | null
  transport: TransportState
}

export const createSessionsRepo = (db: Db) => {
  const joined = (trx: Db) =>
    trx('sessions')
      .join('takes', 'takes.id', 'sessions.take_id')
      .join('users', 'users.id', 'sessions.started_by')
      .select(
        'sessions.id',
        'sessions.group_id',
        'sessions.take_id',
        'takes.title as take_title',
        'takes.duration_sec',
        'sessions.started_by',
        'users.name as starter_name',
        'sessions.leader_id',
        'sessions.transport',
        'sessions.started_at',
        'sessions.ended_at'
      )
  const toSession = (row: Awaited<ReturnType<typeof joined>>[number]): StoredSession => ({
    id: row.id,
    groupId: row.group_id,
    takeId: row.take_id,
    takeTitle: row.take_title,
    takeDurationSec: row.duration_sec ?? 0,
    startedBy: person(row.started_by, row.starter_name),
    leaderId: row.leader_id,
    startedAt: row.started_at.toISOString(),
    endedAt: row.ended_at?.toISOString() ?? null,
    transport: row.transport
  })
  return {
    find: async (id: string, trx: Db = db): Promise<StoredSession | null> => {
      const [row] = await joined(trx).where('sessions.id', id)
      return row ? toSession(row) : null
    },
    /** The session's row locked: changes of lead and transport come one after the other. */
    lock: async (id: string, trx: Db): Promise<StoredSession | null> => {
      await trx('sessions').where({ id }).forUpdate().first('id')
      const [row] = await joined(trx).where('sessions.id', id)
      return row ? toSession(row) : null
    },
    liveOfTake: async (takeId: string, trx: Db): Promise<StoredSession | null> => {
      const [row] = await joined(trx).where('sessions.take_id', takeId).whereNull('sessions.ended_at')
      return row ? toSession(row) : null
    },
    liveOfGroup: async (groupId: string): Promise<StoredSession[]> =>
      (
        await joined(db)
          .where('sessions.group_id', groupId)
          .whereNull('sessions.ended_at')
          .orderBy('sessions.started_at', 'desc')
          .limit(100)
      ).map(toSession),
    insert: async (
      row: { id: string; groupId: string; takeId: string; startedBy: string; transport: TransportState },
      trx: Db
    ): Promise<void> => {
      await trx('sessions').insert({
        id: row.id,
        group_id: row.groupId,
        take_id: row.takeId,
        started_by: row.startedBy,
        leader_id: row.startedBy,
        transport: JSON.stringify(row.transport) as unknown as TransportState
      })
    },
    setTransport: async (id: string, transport: TransportState, trx: Db): Promise<void> => {
      await trx('sessions')
        .where({ id })
        .update({ transport: JSON.stringify(transport) as unknown as TransportState })
    },
    setLeader: async (id: string, leaderId: string | null, trx: Db): Promise<void> => {
      await trx('sessions').where({ id }).update({ leader_id: leaderId })
    },
    end: async (id: string, trx: Db): Promise<void> => {
      await trx('sessions').where({ id }).update({ ended_at: trx.fn.now() })
    },
    people: async (id: string, trx: Db = db): Promise<SessionPerson[]> => {
      const rows = await trx('session_people')
        .join('users', 'users.id', 'session_people.user_id')
        .where('session_people.session_id', id)
        .orderBy(['session_people.joined_at', 'users.id'])
        .select('users.id', 'users.name', 'session_people.is_away', 'session_people.left_at')
      return rows.map((row) => ({ id: row.id, name: row.name, isHere: row.left_at === null, isAway: row.is_away }))
    },
    /** Everybody whom the database takes as present in a live session. */
    here: async (): Promise<{ sessionId: string; userId: string }[]> => {
      const rows = await db('session_people')
        .join('sessions', 'sessions.id', 'session_people.session_id')
        .whereNull('sessions.ended_at')
        .whereNull('session_people.left_at')
        .select('session_people.session_id', 'session_people.user_id')
      return rows.map((row) => ({ sessionId: row.session_id, userId: row.user_id }))
    },
    join: async (id: string, userId: string, trx: Db): Promise<void> => {
      await trx('session_people')
        .insert({ session_id: id, user_id: userId })
        .onConflict(['session_id', 'user_id'])
        .merge({ left_at: null })
    },
    leave: async (id: string, userId: string, trx: Db): Promise<void> => {
      await trx('session_people')
        .where({ session_id: id, user_id: userId })
        .update({ left_at: trx.fn.now(), is_away: false })
    },
    step: async (id: string, userId: string, isAway: boolean, trx: Db): Promise<void> => {
      await trx('session_people').where({ session_id: id, user_id: userId }).update({ is_away: isAway })
    }
  }
}
export type SessionsRepo = ReturnType<typeof createSessionsRepo>
