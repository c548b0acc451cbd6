// The job queue in PostgreSQL (pg-boss). Sending joins the caller's transaction, so that no take is without its job.
import PgBoss from 'pg-boss'
import type { Db } from '@server/db/knex'
import type { Logger } from '@server/logger'

export const ingestQueue = 'ingest'
export const ingestGaveUp = 'ingest-gave-up'
export interface IngestJob {
  takeId: string
}
export const clipQueue = 'clip'
export const clipGaveUp = 'clip-gave-up'
export interface ClipJob {
  clipId: string
}

/** Twelve tries: a worker killed again and again is the machine's trouble, not the recording's. */
const ingestOptions = { retryLimit: 12, retryDelay: 1, expireInHours: 12, deadLetter: ingestGaveUp }

/** Less patience: a clip that took the worker down three times is asked for again by a person, or not at all. */
const clipOptions = { retryLimit: 3, retryDelay: 1, expireInHours: 2, deadLetter: clipGaveUp }

export interface JobQueue {
  clip(clipId: string, trx: Db): Promise<void>
  ingest(takeId: string, trx: Db): Promise<void>
  boss: PgBoss
  stop(): Promise<void>
}

interface Connection {
  query(text: string, values: unknown[]): Promise<{ rows: unknown[]; rowCount: number | null }>
}
/** pg-boss on the connection of a Knex transaction. */
const onTransaction = (trx: Db): PgBoss.Db => ({
  executeSql: async (text, values) => {
    const connection = (await trx.client.acquireConnection()) as Connection
    const { rows, rowCount } = await connection.query(text, values)
    return { rows, rowCount: rowCount ?? 0 }
  }
})

export const startQueue = async (databaseUrl: string, log: Logger, role: 'server' | 'worker'): Promise<JobQueue> => {
  const boss = new PgBoss({
    connectionString: databaseUrl,
    application_name: `plumbline-${role}-jobs`,
    max: role === 'worker' ? 6 : 3,
    supervise: role === 'worker',
    schedule: false
  })
  boss.on('error', (error) => log.error('job', 'the queue had trouble', error))
  await boss.start()
  await boss.createQueue(ingestGaveUp, { name: ingestGaveUp, policy: 'standard' })
  await boss.createQueue(ingestQueue, { name: ingestQueue, policy: 'standard', ...ingestOptions })
  await boss.createQueue(clipGaveUp, { name: clipGaveUp, policy: 'standard' })
  await boss.createQueue(clipQueue, { name: clipQueue, policy: 'standard', ...clipOptions })
  return {
    boss,
    clip: async (clipId, trx) => {
      await boss.send(clipQueue, { clipId } satisfies ClipJob, { ...clipOptions, db: onTransaction(trx) })
    },
    ingest: async (takeId, trx) => {
      await boss.send(ingestQueue, { takeId } satisfies IngestJob, { ...ingestOptions, db: onTransaction(trx) })
    },
    stop: () => boss.stop({ graceful: true, timeout: 2000, wait: true })
  }
}
