// What the queue says is being worked on: read to find the jobs of workers that died.
import type { Db } from '@server/db/knex'

export const createJobsRepo = (db: Db) => ({
  /** Jobs of a queue taken up more than `olderThanSec` ago and not finished, with the id of what they are about. */
  active: async (
    queue: string,
    about: 'takeId' | 'clipId',
    olderThanSec: number
  ): Promise<{ id: string; aboutId: string }[]> => {
    const result = await db.raw<{ rows: { id: string; about_id: string }[] }>(
      `select id, data ->> ? as about_id from pgboss.job
       where name = ? and state = 'active' and started_on < now() - make_interval(secs => ?)`,
      [about, queue, olderThanSec]
    )
    return result.rows.map((row) => ({ id: row.id, aboutId: row.about_id }))
  }
})
export type JobsRepo = ReturnType<typeof createJobsRepo>
