import type { ChangeSavedLoop, CreateSavedLoop, SavedLoop } from '@shared/contracts/saved-loops'
import type { Db } from '@server/db/knex'
import type { SavedLoopRow } from '@server/db/tables'

/** With whose it is: nobody is ever told of another person's. */
export type StoredLoop = SavedLoop & { userId: string }

const columns = [
  'id',
  'take_id',
  'user_id',
  'name',
  'start_sec',
  'end_sec',
  'rate',
  'ladder',
  'rest_beats',
  'created_at',
  'updated_at'
] as const

const toLoop = (row: SavedLoopRow): StoredLoop => ({
  id: row.id,
  takeId: row.take_id,
  userId: row.user_id,
  name: row.name,
  span: { startSec: row.start_sec, endSec: row.end_sec },
  rate: row.rate,
  ladder: row.ladder,
  restBeats: row.rest_beats,
  createdAt: row.created_at.toISOString(),
  updatedAt: row.updated_at.toISOString()
})

const toRow = (change: ChangeSavedLoop): Partial<SavedLoopRow> => ({
  ...(change.name === undefined ? {} : { name: change.name }),
  ...(change.span === undefined ? {} : { start_sec: change.span.startSec, end_sec: change.span.endSec }),
  ...(change.rate === undefined ? {} : { rate: change.rate }),
  ...(change.ladder === undefined ? {} : { ladder: change.ladder }),
  ...(change.restBeats === undefined ? {} : { rest_beats: change.restBeats })
})

export const createSavedLoopsRepo = (db: Db) => ({
  ofPerson: async (takeId: string, userId: string): Promise<StoredLoop[]> => {
    const rows = await db('saved_loops')
      .where({ take_id: takeId, user_id: userId })
      .orderBy(['start_sec', 'end_sec', 'created_at', 'id'])
      .select(...columns)
    return rows.map(toLoop)
  },
  find: async (id: string, trx: Db = db): Promise<StoredLoop | null> => {
    const row = await trx('saved_loops')
      .where({ id })
      .first(...columns)
    return row ? toLoop(row) : null
  },
  count: async (takeId: string, userId: string, trx: Db): Promise<number> => {
    const [row] = await trx('saved_loops')
      .where({ take_id: takeId, user_id: userId })
      .count<{ count: number }[]>('id as count')
    return row?.count ?? 0
  },
  insert: async (takeId: string, userId: string, { id, ...input }: CreateSavedLoop, trx: Db): Promise<void> => {
    await trx('saved_loops').insert({ id, take_id: takeId, user_id: userId, ...toRow(input) })
  },
  change: async (id: string, change: ChangeSavedLoop, trx: Db): Promise<void> => {
    await trx('saved_loops')
      .where({ id })
      .update({ ...toRow(change), updated_at: trx.fn.now() })
  },
  /** True when it was there. */
  remove: async (id: string, trx: Db): Promise<boolean> => (await trx('saved_loops').where({ id }).delete()) > 0
})
export type SavedLoopsRepo = ReturnType<typeof createSavedLoopsRepo>
