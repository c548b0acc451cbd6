import type { Person } from '@shared/contracts/common'
import { chartDocument } from '@shared/music/chart-document'
import type { ChartBody } from '@shared/music/types'
import type { Db } from '@server/db/knex'
import { personOrNull } from '@server/repositories/people'

export interface StoredTune {
  id: string
  groupId: string
  title: string
  createdBy: Person | null
  createdAt: string
  takeCount: number
  chart: ChartBody
  chartRevision: number
}

interface TuneJoined {
  id: string
  group_id: string
  title: string
  created_by: string | null
  creator_name: string | null
  created_at: Date
  take_count: number
  body: ChartBody | null
  revision: number | null
}

export const createTunesRepo = (db: Db) => {
  const joined = (trx: Db) =>
    trx('tunes')
      .leftJoin('users', 'users.id', 'tunes.created_by')
      .leftJoin('documents', (on) =>
        on.on('documents.tune_id', 'tunes.id').andOnVal('documents.kind', chartDocument.name)
      )
      .select<TuneJoined[]>(
        'tunes.id',
        'tunes.group_id',
        'tunes.title',
        'tunes.created_by',
        'users.name as creator_name',
        'tunes.created_at',
        trx.raw('(select count(*) from takes where takes.tune_id = tunes.id) as take_count'),
        'documents.body',
        'documents.revision'
      )
  const toTune = (row: TuneJoined): StoredTune => ({
    id: row.id,
    groupId: row.group_id,
    title: row.title,
    createdBy: personOrNull(row.created_by, row.creator_name),
    createdAt: row.created_at.toISOString(),
    takeCount: row.take_count,
    chart: row.body ?? chartDocument.empty,
    chartRevision: row.revision ?? 0
  })
  return {
    ofGroup: async (groupId: string): Promise<StoredTune[]> =>
      (await joined(db).where('tunes.group_id', groupId).orderBy(['tunes.title', 'tunes.id'])).map(toTune),
    find: async (id: string, trx: Db = db): Promise<StoredTune | null> => {
      const [row] = await joined(trx).where('tunes.id', id)
      return row ? toTune(row) : null
    },
    insert: async (row: { id: string; groupId: string; title: string; createdBy: string }, trx: Db): Promise<void> => {
      await trx('tunes').insert({ id: row.id, group_id: row.groupId, title: row.title, created_by: row.createdBy })
    },
    rename: async (id: string, title: string, trx: Db): Promise<void> => {
      await trx('tunes').where({ id }).update({ title, updated_at: trx.fn.now() })
    },
    remove: async (id: string, trx: Db): Promise<void> => {
      await trx('tunes').where({ id }).delete()
    }
  }
}
export type TunesRepo = ReturnType<typeof createTunesRepo>
