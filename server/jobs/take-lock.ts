// One worker to a take at a time. The lock hangs on a database connection: when a worker dies, it lets go by itself,
// which is how others know that its job is free again.
import pg from 'pg'
import type { Db } from '@server/db/knex'

/** First half of the advisory lock's key: ours among whatever else uses the database. */
const lockSpace = 7061

export interface TakeLock {
  release(): Promise<void>
  /** Resolves when the connection that holds the lock is lost. */
  lost: Promise<void>
}

export const lockTake = async (databaseUrl: string, takeId: string): Promise<TakeLock | null> => {
  const client = new pg.Client({
    connectionString: databaseUrl,
    application_name: 'plumbline-take-lock',
    keepAlive: true
  })
  const lost = new Promise<void>((gone) => {
    client.on('error', () => gone())
    client.on('end', () => gone())
  })
  await client.connect()
  const { rows } = await client.query<{ got: boolean }>('select pg_try_advisory_lock($1, hashtext($2)) as got', [
    lockSpace,
    takeId
  ])
  if (!rows[0]?.got) {
    await client.end()
    return null
  }
  return { release: () => client.end().catch(() => undefined), lost }
}

/** Of these takes, those that no living worker holds. */
export const unheldTakes = async (takeIds: string[], db: Db): Promise<string[]> => {
  if (takeIds.length === 0) return []
  const result = await db.raw<{ rows: { id: string }[] }>(
    `select id from unnest(:ids::text[]) as id
     where not exists (select 1 from pg_locks where locktype = 'advisory' and classid = :space and objid = hashtext(id)::bigint & 4294967295 and granted
                       and database = (select oid from pg_database where datname = current_database()))`,
    { ids: takeIds, space: lockSpace }
  )
  return result.rows.map((row) => row.id)
}
