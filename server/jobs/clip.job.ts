// Makes the file of a passage: from the queue through the media code into the clip's row.
import { allows } from '@shared/access/permissions'
import { barMapDocument } from '@shared/timing/bar-map-document'
import { problem, Problem } from '@shared/errors/problems'
import { takeRelations } from '@server/access/take-relations'
import { lockTake } from '@server/jobs/take-lock'
import type { Logger } from '@server/logger'
import { runClip } from '@server/media/run-clip'
import type { ClipStage } from '@server/media/make-clip'
import type { MediaStorage } from '@server/media/storage'
import type { AccessRepo } from '@server/repositories/access.repo'
import type { ClipsRepo } from '@server/repositories/clips.repo'
import type { DocumentsRepo } from '@server/repositories/documents.repo'
import type { TakesRepo } from '@server/repositories/takes.repo'

const stageWords: Record<ClipStage, string> = {
  decoding: 'Finding the passage',
  rendering: 'Playing it',
  finishing: 'Writing the file'
}
/** Where a stage begins in the whole, and how much of it it is: finding takes long in a long recording only. */
const stageShare: Record<ClipStage, [number, number]> = {
  decoding: [0, 0.1],
  rendering: [0.1, 0.88],
  finishing: [0.98, 0.02]
}
const brokenWords = 'Something went wrong on our side while making this file. Ask for it again.'
/** A row that is gone is noticed within this time, ms. */
const lookEveryMs = 500

interface Deps {
  databaseUrl: string
  clips: ClipsRepo
  takes: Pick<TakesRepo, 'find'>
  access: Pick<AccessRepo, 'takeStanding'>
  documents: Pick<DocumentsRepo, 'find'>
  storage: MediaStorage
  log: Logger
}

export const createClipJob = ({ databaseUrl, clips, takes, access, documents, storage, log }: Deps) => {
  const mayHear = async (userId: string, takeId: string): Promise<boolean> => {
    const standing = await access.takeStanding(userId, takeId)
    return standing !== null && allows('take:hear', takeRelations(standing))
  }
  const drop = async (takeId: string, clipId: string): Promise<void> => {
    await clips.remove([clipId])
    await storage.removeClip(takeId, clipId)
  }

  const make = async (clipId: string, signal: AbortSignal): Promise<void> => {
    const clip = await clips.find(clipId)
    if (!clip || clip.state === 'ready' || clip.state === 'failed') return
    const { takeId, userId, settings } = clip
    if (!(await mayHear(userId, takeId))) return drop(takeId, clipId)
    const take = await takes.find(takeId)
    const bars = barMapDocument.body.safeParse((await documents.find(barMapDocument.name, { takeId }))?.body)
    const gone = new AbortController()
    let at: [string, number] = [stageWords.decoding, 0]
    const look = async (): Promise<void> => {
      if (!(await clips.setWorking(clipId, ...at))) gone.abort()
    }
    await look()
    const looking = setInterval(() => {
      look().catch((error: unknown) => log.error('job', 'progress of a clip was not told', error, { clipId }))
    }, lookEveryMs)
    try {
      const made = await runClip(
        {
          source: storage.ingestPaths(takeId).source,
          target: storage.clipPath(takeId, clipId),
          settings,
          barMap: bars.success ? bars.data : null,
          gainDb: take?.gainDb ?? 0
        },
        {
          signal: AbortSignal.any([signal, gone.signal]),
          onProgress: (stage, fraction) => {
            const [from, share] = stageShare[stage]
            at = [stageWords[stage], from + share * Math.max(0, Math.min(1, fraction))]
          }
        }
      )
      clearInterval(looking)
      if (!made.ok) await clips.setFailed(clipId, made.error.sentence)
      // Deleted in the last moment, by itself or with its take.
      else if (!(await clips.setReady(clipId, made.value.bytes))) await storage.removeClip(takeId, clipId)
    } catch (error) {
      // Nobody wants it any more: that is no failure.
      if (!gone.signal.aborted) throw error
    } finally {
      clearInterval(looking)
    }
  }

  return {
    /** Safe to run any number of times for one clip; throws to be tried again. */
    run: async (clipId: string, signal: AbortSignal): Promise<void> => {
      const lock = await lockTake(databaseUrl, clipId)
      if (!lock) throw problem('conflict', { detail: 'another worker has this clip' })
      const lost = new AbortController()
      void lock.lost.then(() => lost.abort())
      try {
        await make(clipId, AbortSignal.any([signal, lost.signal]))
      } catch (error) {
        if (!(error instanceof Problem)) log.error('media', 'a clip could not be made', error, { clipId })
        throw error
      } finally {
        await lock.release()
      }
    },

    gaveUp: async (clipId: string): Promise<void> => {
      await clips.setFailed(clipId, brokenWords)
    },

    /** Clips whose time is over or whose owner may not hear the take any more, and files without a row. */
    sweep: async (now: number, strayMs: number): Promise<void> => {
      const kept = new Set<string>()
      for (const { id, takeId, userId, isOver } of await clips.every()) {
        if (isOver || !(await mayHear(userId, takeId))) await drop(takeId, id)
        else kept.add(id)
      }
      for (const { takeId, clipId } of await storage.clips(now, strayMs))
        if (!kept.has(clipId)) await storage.removeClip(takeId, clipId)
    }
  }
}
