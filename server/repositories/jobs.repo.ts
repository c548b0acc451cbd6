// What the queue says is being worked on: read to find the jobs of workers that died.
import type { Db } from '@server/db/knex'

export const createJobsRepo = (db: Db) => ({
  /** Ingest jobs taken up more than `olderThanSec` ago and not finished. */
  active: async (queue: string, olderThanSec: number): Promise<{ id: string; takeId: string }[]> => {
    const result = await db.raw<{ rows: { id: string; take_id: string }[] }>(
      `select id, data ->> 'takeId' as take_id from pgboss.job
       where name = ? and state = 'active' and started_on < now() - make_interval(secs => ?)`,
      [queue, olderThanSec]
    )
    return result.rows.map((row) => ({ id: row.id, takeId: row.take_id }))
  }
})
export type JobsRepo = ReturnType<typeof createJobsRepo>
