import type { Db } from '@server/db/knex'

export interface StoredRecording {
  id: string
  groupId: string
  uploaderId: string
  nextPiece: number
  bytes: number
  takeId: string | null
}

export const createRecordingsRepo = (db: Db) => ({
  find: async (id: string, trx: Db = db): Promise<StoredRecording | null> => {
    const row = await trx('recordings')
      .where({ id })
      .first('id', 'group_id', 'uploader_id', 'next_piece', 'bytes', 'take_id')
    return row
      ? {
          id: row.id,
          groupId: row.group_id,
          uploaderId: row.uploader_id,
          nextPiece: row.next_piece,
          bytes: row.bytes,
          takeId: row.take_id
        }
      : null
  },
  insert: async (row: { id: string; groupId: string; uploaderId: string; mime: string }, trx: Db): Promise<void> => {
    await trx('recordings').insert({ id: row.id, group_id: row.groupId, uploader_id: row.uploaderId, mime: row.mime })
  },
  /** How many a person has begun and neither kept nor dropped. */
  openCount: async (uploaderId: string, trx: Db): Promise<number> => {
    const [row] = await trx('recordings')
      .where({ uploader_id: uploaderId })
      .whereNull('take_id')
      .count<{ count: number }[]>('id as count')
    return row?.count ?? 0
  },
  /** Counts a piece that is safe on disk; only the one that was awaited counts. */
  countPiece: async (id: string, index: number, bytes: number): Promise<void> => {
    await db('recordings')
      .where({ id, next_piece: index })
      .update({ next_piece: index + 1, bytes: db.raw('bytes + ?', [bytes]) })
  },
  setTake: async (id: string, takeId: string): Promise<void> => {
    await db('recordings').where({ id }).update({ take_id: takeId })
  },
  remove: async (id: string): Promise<void> => {
    await db('recordings').where({ id }).delete()
  }
})
export type RecordingsRepo = ReturnType<typeof createRecordingsRepo>
