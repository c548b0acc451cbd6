import type { Clip, ClipSettings } from '@shared/contracts/clips'
import type { Db } from '@server/db/knex'
import type { ClipRow } from '@server/db/tables'

/** With whose it is: nobody is ever told of another person's. */
export type StoredClip = Clip & { userId: string }

export interface NewClip {
  id: string
  takeId: string
  userId: string
  settings: ClipSettings
  fileName: string
  durationSec: number
  expiresAt: Date
}

const columns = [
  'id',
  'take_id',
  'user_id',
  'settings',
  'file_name',
  'duration_sec',
  'state',
  'stage',
  'progress',
  'fault',
  'bytes',
  'created_at',
  'expires_at'
] as const

const toClip = (row: ClipRow): StoredClip => ({
  id: row.id,
  takeId: row.take_id,
  userId: row.user_id,
  settings: row.settings,
  fileName: row.file_name,
  durationSec: row.duration_sec,
  state: row.state,
  stage: row.stage,
  progress: row.progress,
  fault: row.fault,
  bytes: row.bytes,
  createdAt: row.created_at.toISOString(),
  expiresAt: row.expires_at.toISOString()
})

export const createClipsRepo = (db: Db) => {
  const alive = (trx: Db) => trx('clips').where('expires_at', '>', trx.fn.now())
  return {
    ofPerson: async (takeId: string, userId: string): Promise<StoredClip[]> => {
      const rows = await alive(db)
        .where({ take_id: takeId, user_id: userId })
        .orderBy([
          { column: 'created_at', order: 'desc' },
          { column: 'id', order: 'desc' }
        ])
        .select(...columns)
      return rows.map(toClip)
    },
    find: async (id: string, trx: Db = db): Promise<StoredClip | null> => {
      const row = await alive(trx)
        .where({ id })
        .first(...columns)
      return row ? toClip(row) : null
    },
    /** What a person has: being made or waiting for it, and in all. */
    counts: async (userId: string, trx: Db): Promise<{ underWay: number; all: number }> => {
      const rows = await alive(trx).where({ user_id: userId }).select('state')
      return {
        underWay: rows.filter(({ state }) => state === 'waiting' || state === 'working').length,
        all: rows.length
      }
    },
    insert: async (clip: NewClip, trx: Db): Promise<void> => {
      await trx('clips').insert({
        id: clip.id,
        take_id: clip.takeId,
        user_id: clip.userId,
        settings: JSON.stringify(clip.settings) as unknown as ClipSettings,
        file_name: clip.fileName,
        duration_sec: clip.durationSec,
        expires_at: clip.expiresAt
      })
    },
    /** False when it has been deleted meanwhile, or is finished. */
    setWorking: async (id: string, stage: string, progress: number): Promise<boolean> =>
      (await alive(db)
        .where({ id })
        .whereIn('state', ['waiting', 'working'])
        .update({ state: 'working', stage, progress })) > 0,
    setFailed: async (id: string, fault: string): Promise<boolean> =>
      (await alive(db)
        .where({ id })
        .whereIn('state', ['waiting', 'working'])
        .update({ state: 'failed', stage: null, progress: 0, fault })) > 0,
    /** False when it has been deleted meanwhile. */
    setReady: async (id: string, bytes: number): Promise<boolean> =>
      (await alive(db).where({ id }).update({ state: 'ready', stage: null, progress: 1, fault: null, bytes })) > 0,
    remove: async (ids: string[], trx: Db = db): Promise<void> => {
      await trx('clips').whereIn('id', ids).delete()
    },
    /** All there are, also those whose time is over. */
    every: async (): Promise<{ id: string; takeId: string; userId: string; isOver: boolean }[]> => {
      const rows = await db('clips').select<(Pick<ClipRow, 'id' | 'take_id' | 'user_id'> & { is_over: boolean })[]>(
        'id',
        'take_id',
        'user_id',
        db.raw('expires_at <= now() as is_over')
      )
      return rows.map((row) => ({ id: row.id, takeId: row.take_id, userId: row.user_id, isOver: row.is_over }))
    }
  }
}
export type ClipsRepo = ReturnType<typeof createClipsRepo>
