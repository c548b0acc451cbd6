// Passages as files, made for the one who asked. Nobody else is told of them, so a change writes no group event.
import { clipSec } from '@shared/audio/clips/plan-clip'
import type { Clip, ClipSettings, CreateClip } from '@shared/contracts/clips'
import { problem } from '@shared/errors/problems'
import type { Bounds } from '@shared/limits'
import { clipFileName } from '@shared/practice/clip-words'
import { type BarMap, createBarMap } from '@shared/timing/bar-map'
import { barMapDocument } from '@shared/timing/bar-map-document'
import type { Db } from '@server/db/knex'
import type { Actor, FileAnswer } from '@server/http/handlers'
import type { JobQueue } from '@server/jobs/queue'
import type { MediaStorage } from '@server/media/storage'
import type { ClipsRepo, StoredClip } from '@server/repositories/clips.repo'
import type { DocumentsRepo } from '@server/repositories/documents.repo'
import type { StoredTake, TakesRepo } from '@server/repositories/takes.repo'
import { stillAllowed } from '@server/services/still-allowed'

interface Deps {
  db: Db
  clips: ClipsRepo
  takes: Pick<TakesRepo, 'home' | 'find'>
  documents: Pick<DocumentsRepo, 'find'>
  storage: Pick<MediaStorage, 'clipPath' | 'removeClip'>
  queue: Pick<JobQueue, 'clip'>
  bounds: Pick<Bounds, 'clipSec' | 'clipDays' | 'clipsUnderWay' | 'clipsPerPerson'>
  now(): Date
}

const mimes: Record<ClipSettings['format'], string> = { wav: 'audio/wav', m4a: 'audio/mp4' }
const dayMs = 24 * 3600_000

const unfit = (path: string, message: string) =>
  problem('invalid', { errors: [{ in: 'body', path: `settings.${path}`, message }] })

/** Whether two askings are the same; `jsonb` keeps no order of keys. */
const isSame = (a: ClipSettings, b: ClipSettings): boolean => inOrder(a) === inOrder(b)
const inOrder = (value: unknown): string =>
  JSON.stringify(value, (_, part: unknown) =>
    part && typeof part === 'object' && !Array.isArray(part)
      ? Object.fromEntries(Object.entries(part).sort(([a], [b]) => (a < b ? -1 : 1)))
      : part
  )

export const createClipService = (deps: Deps) => {
  const { db, clips, takes, documents, storage, queue, bounds, now } = deps

  const found = async (clipId: string, trx: Db = db): Promise<StoredClip> => {
    const clip = await clips.find(clipId, trx)
    if (!clip) throw problem('not-found')
    return clip
  }
  const barMapOf = async (takeId: string): Promise<BarMap | null> => {
    const stored = await documents.find(barMapDocument.name, { takeId })
    const body = stored && barMapDocument.body.safeParse(stored.body)
    return body?.success ? createBarMap(body.data) : null
  }
  /** The settings as they can be met by this take. */
  const fitted = (settings: ClipSettings, take: StoredTake, map: BarMap | null): ClipSettings => {
    if (take.state !== 'ready' || take.durationSec === null)
      throw problem('not-ready', { detail: 'This recording is still being read.' })
    if (settings.span.startSec >= take.durationSec) throw unfit('span.startSec', 'The take is over before that.')
    if (!map && settings.click) throw unfit('click', 'This take has no bars to click along.')
    if (!map && settings.countIn !== 'none') throw unfit('countIn', 'This take has no bars to count in from.')
    const endSec = Math.min(settings.span.endSec, take.durationSec)
    const kept = { ...settings, span: { startSec: settings.span.startSec, endSec } }
    if (clipSec(kept, map) > bounds.clipSec)
      throw unfit('span.endSec', `The file would last longer than ${Math.round(bounds.clipSec / 60)} minutes.`)
    return kept
  }

  return {
    list: async (actor: Actor, takeId: string): Promise<{ items: Clip[] }> => ({
      items: await clips.ofPerson(takeId, actor.id)
    }),

    get: (clipId: string): Promise<Clip> => found(clipId),

    create: async (actor: Actor, takeId: string, { id, place, settings }: CreateClip): Promise<Clip> => {
      const map = await barMapOf(takeId)
      return db.transaction(async (trx) => {
        const home = await takes.home(takeId, trx)
        if (!home) throw problem('not-found')
        await stillAllowed(actor, 'take:hear', { takeId }, home.groupId, trx)
        const take = await takes.find(takeId, trx)
        if (!take) throw problem('not-found')
        const kept = fitted(settings, take, map)
        const before = await clips.find(id, trx)
        if (before) {
          // Sent again after a lost answer.
          if (before.takeId !== takeId || before.userId !== actor.id || !isSame(before.settings, kept))
            throw problem('already-there')
          return before
        }
        const has = await clips.counts(actor.id, trx)
        if (has.underWay >= bounds.clipsUnderWay)
          throw problem('over-quota', { detail: 'Wait until one of your files is ready, or stop one.' })
        if (has.all >= bounds.clipsPerPerson)
          throw problem('over-quota', { detail: 'You keep as many files as one person may. Delete some first.' })
        await clips.insert(
          {
            id,
            takeId,
            userId: actor.id,
            settings: kept,
            fileName: clipFileName({ title: take.title, place, map }, kept),
            durationSec: clipSec(kept, map),
            expiresAt: new Date(now().getTime() + bounds.clipDays * dayMs)
          },
          trx
        )
        await queue.clip(id, trx)
        return found(id, trx)
      })
    },

    file: async (clipId: string): Promise<FileAnswer> => {
      const clip = await found(clipId)
      if (clip.state !== 'ready') throw problem('not-ready', { detail: 'This file is still being made.' })
      return {
        file: storage.clipPath(clip.takeId, clipId),
        mime: mimes[clip.settings.format],
        downloadName: clip.fileName
      }
    },

    /** A worker that is making it finds it gone and stops. */
    remove: async (clipId: string): Promise<void> => {
      const clip = await found(clipId)
      await clips.remove([clipId])
      await storage.removeClip(clip.takeId, clipId)
    }
  }
}
export type ClipService = ReturnType<typeof createClipService>
