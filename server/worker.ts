// The worker process: takes jobs from the queue, one recording at a time on each of two lanes, one clip on a third.
import type PgBoss from 'pg-boss'
import { configOrExit } from '@server/config'
import { connect } from '@server/db/knex'
import { createClipJob } from '@server/jobs/clip.job'
import { createIngestJob } from '@server/jobs/ingest.job'
import {
  clipGaveUp,
  type ClipJob,
  clipQueue,
  type IngestJob,
  ingestGaveUp,
  ingestQueue,
  startQueue
} from '@server/jobs/queue'
import { unheldTakes } from '@server/jobs/take-lock'
import { createLogger } from '@server/logger'
import { createLocalStorage } from '@server/media/storage'
import { createAccessRepo } from '@server/repositories/access.repo'
import { createClipsRepo } from '@server/repositories/clips.repo'
import { createDocumentsRepo } from '@server/repositories/documents.repo'
import { createEventsRepo } from '@server/repositories/events.repo'
import { createJobsRepo } from '@server/repositories/jobs.repo'
import { createTakesRepo } from '@server/repositories/takes.repo'
import { onShutdown } from '@server/shutdown'

const lanes = 2
/** A job taken up this long ago whose take nobody holds belongs to a worker that died. */
const orphanAfterSec = 4
const lookEveryMs = 2000
const sweepEveryMs = 3600_000
const uploadsKeptMs = 48 * 3600_000
const strayKeptMs = 3600_000

const config = configOrExit()
const log = createLogger((line) => process.stdout.write(line))
const db = connect(config.databaseUrl)
const takes = createTakesRepo(db)
const storage = createLocalStorage(config.storageDir)
const jobs = createJobsRepo(db)
const ingest = createIngestJob({
  db,
  databaseUrl: config.databaseUrl,
  takes,
  events: createEventsRepo(db),
  storage,
  log,
  now: Date.now
})
const clips = createClipJob({
  databaseUrl: config.databaseUrl,
  clips: createClipsRepo(db),
  takes,
  access: createAccessRepo(db),
  documents: createDocumentsRepo(db),
  storage,
  log
})
const queue = await startQueue(config.databaseUrl, log, 'worker')
const stop = new AbortController()

const freeOrphansOf = async (name: string, about: 'takeId' | 'clipId'): Promise<void> => {
  const active = await jobs.active(name, about, orphanAfterSec)
  const unheld = new Set(
    await unheldTakes(
      active.map((job) => job.aboutId),
      db
    )
  )
  const orphans = active.filter((job) => unheld.has(job.aboutId))
  if (orphans.length === 0) return
  log.warn('job', 'taking over what a dead worker left', { count: orphans.length })
  for (const job of orphans) await queue.boss.fail(name, job.id, { reason: 'its worker died' })
}
const freeOrphans = async (): Promise<void> => {
  await freeOrphansOf(ingestQueue, 'takeId')
  await freeOrphansOf(clipQueue, 'clipId')
}

/** What dead ingests, broken uploads and crashes between file and row left behind. */
const sweep = async (): Promise<void> => {
  await storage.sweep(Date.now(), uploadsKeptMs)
  const old = await storage.takeIds(Date.now(), strayKeptMs)
  const known = await takes.ids(old)
  for (const id of old.filter((one) => !known.has(one))) await storage.removeTake(id)
  await clips.sweep(Date.now(), strayKeptMs)
}

const each =
  <J>(work: (about: J) => Promise<void>) =>
  async (batch: PgBoss.Job<J>[]): Promise<void> => {
    for (const job of batch) await work(job.data)
  }
const options = { batchSize: 1, pollingIntervalSeconds: 0.5 }
for (let lane = 0; lane < lanes; lane += 1) {
  await queue.boss.work(
    ingestQueue,
    options,
    each<IngestJob>(({ takeId }) => ingest.run(takeId, stop.signal))
  )
}
// One at a time: a clip is one person's, a recording is what a whole group waits for.
await queue.boss.work(
  clipQueue,
  options,
  each<ClipJob>(({ clipId }) => clips.run(clipId, stop.signal))
)
const seldom = { batchSize: 1, pollingIntervalSeconds: 5 }
await queue.boss.work(
  ingestGaveUp,
  seldom,
  each<IngestJob>(({ takeId }) => ingest.gaveUp(takeId))
)
await queue.boss.work(
  clipGaveUp,
  seldom,
  each<ClipJob>(({ clipId }) => clips.gaveUp(clipId))
)

const guarded = (work: () => Promise<unknown>) => () => {
  work().catch((error: unknown) => log.error('job', 'house-keeping failed', error))
}
const timers = [setInterval(guarded(freeOrphans), lookEveryMs), setInterval(guarded(sweep), sweepEveryMs)]
guarded(sweep)()
log.info('job', 'the worker is at work')

onShutdown(log, async () => {
  for (const timer of timers) clearInterval(timer)
  stop.abort()
  await queue.stop()
  await db.destroy()
})
