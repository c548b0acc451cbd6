// Reads a new recording: from the queue through the media code into the take's row.
import { problem, Problem } from '@shared/errors/problems'
import type { Db } from '@server/db/knex'
import { lockTake } from '@server/jobs/take-lock'
import type { Logger } from '@server/logger'
import { ingestRecording, type IngestStage } from '@server/media/ingest'
import type { MediaStorage } from '@server/media/storage'
import type { EventsRepo } from '@server/repositories/events.repo'
import type { TakesRepo } from '@server/repositories/takes.repo'

export const progressChannel = 'plumbline_progress'
const stageWords: Record<IngestStage, string> = {
  probing: 'Looking at the recording',
  decoding: 'Listening through it',
  finishing: 'Putting it in its place'
}
/** Progress is told at most this often, ms. */
const progressEveryMs = 400
const brokenWords = 'Something went wrong on our side while reading this recording. Try again.'

interface Deps {
  db: Db
  databaseUrl: string
  takes: TakesRepo
  events: EventsRepo
  storage: MediaStorage
  log: Logger
  now(): number
}

export const createIngestJob = ({ db, databaseUrl, takes, events, storage, log, now }: Deps) => {
  const finish = (takeId: string, work: (trx: Db) => Promise<unknown>): Promise<void> =>
    db.transaction(async (trx) => {
      const home = await takes.home(takeId, trx)
      if (!home) return
      // The event first: it locks the group, as every write does before it touches rows inside.
      await events.add({ groupId: home.groupId, type: 'take:updated', objectId: takeId, takeId }, trx)
      await work(trx)
    })

  const fail = (takeId: string, sentence: string): Promise<void> =>
    finish(takeId, (trx) => takes.setFailed(takeId, sentence, trx))

  const progressOf = (takeId: string) => {
    let told = 0
    return (stage: IngestStage, fraction: number): void => {
      if (now() - told < progressEveryMs && fraction < 1) return
      told = now()
      const progress = Math.max(0, Math.min(1, fraction))
      takes
        .setWorking(takeId, stageWords[stage], progress)
        .then(() =>
          db.raw('select pg_notify(?, ?)', [
            progressChannel,
            JSON.stringify({ takeId, stage: stageWords[stage], progress })
          ])
        )
        .catch((error: unknown) => log.error('job', 'progress was not told', error, { takeId }))
    }
  }

  return {
    /** Safe to run any number of times for one take; throws to be tried again. */
    run: async (takeId: string, signal: AbortSignal): Promise<void> => {
      const lock = await lockTake(databaseUrl, takeId)
      if (!lock) throw problem('conflict', { detail: 'another worker has this take' })
      const stop = new AbortController()
      const onAbort = () => stop.abort()
      signal.addEventListener('abort', onAbort)
      void lock.lost.then(onAbort)
      try {
        const take = await takes.find(takeId)
        if (!take || take.state === 'ready') return
        if (!(await takes.setWorking(takeId, stageWords.probing, 0))) return
        const result = await ingestRecording({
          ...storage.ingestPaths(takeId),
          signal: stop.signal,
          onProgress: progressOf(takeId)
        })
        if (!result.ok) {
          await fail(takeId, result.error.sentence)
          await storage.removeTake(takeId)
          return
        }
        const { durationSec, sampleRate, channels, loudness, tuningCents, rendition, manifest } = result.value
        await finish(takeId, (trx) =>
          takes.setReady(
            takeId,
            {
              durationSec,
              sampleRate,
              channels,
              loudnessLufs: loudness.integratedLufs,
              truePeakDb: loudness.truePeakDb,
              gainDb: loudness.gainDb,
              tuningCents,
              renditionMime: rendition.mime,
              manifest
            },
            trx
          )
        )
      } catch (error) {
        if (!(error instanceof Problem)) log.error('media', 'a recording could not be read', error, { takeId })
        throw error
      } finally {
        signal.removeEventListener('abort', onAbort)
        await lock.release()
      }
    },
    gaveUp: (takeId: string): Promise<void> => fail(takeId, brokenWords)
  }
}
export type IngestJobRunner = ReturnType<typeof createIngestJob>
