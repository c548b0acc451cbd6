import { z } from 'zod'
import { abilitiesOn } from '@shared/access/permissions'
import type { Relation } from '@shared/access/relations'
import { Instant, Uuid } from '@shared/contracts/common'
import type { PiecesManifest, PlayedOver, Reach, Take, TakeCard } from '@shared/contracts/takes'
import { takeRoutes } from '@shared/contracts/takes'
import { addressOf } from '@shared/contracts/route'
import { problem } from '@shared/errors/problems'
import type { Bounds } from '@shared/limits'
import type { PieceManifest } from '@shared/audio/piece-manifest'
import { takeRelations } from '@server/access/take-relations'
import type { Db } from '@server/db/knex'
import type { Actor, Asker, FileAnswer, UploadedFile } from '@server/http/handlers'
import type { JobQueue } from '@server/jobs/queue'
import { type Probe, probeRecording } from '@server/media/probe'
import type { MediaStorage } from '@server/media/storage'
import type { AccessRepo } from '@server/repositories/access.repo'
import type { AuditRepo } from '@server/repositories/audit.repo'
import type { EventsRepo } from '@server/repositories/events.repo'
import type { GroupsRepo } from '@server/repositories/groups.repo'
import type { StoredTake, TakeCursor, TakesRepo } from '@server/repositories/takes.repo'
import type { TunesRepo } from '@server/repositories/tunes.repo'
import type { DocumentPlace } from '@server/services/documents.service'
import type { PlayedOverService } from '@server/services/played-over'
import { stillAllowed } from '@server/services/still-allowed'

interface Deps {
  db: Db
  takes: TakesRepo
  tunes: Pick<TunesRepo, 'find'>
  access: AccessRepo
  groups: Pick<GroupsRepo, 'members'>
  events: EventsRepo
  audit: AuditRepo
  storage: MediaStorage
  queue: Pick<JobQueue, 'ingest'>
  playedOver: PlayedOverService
  bounds: Pick<Bounds, 'takesPerMember' | 'bytesPerMember'>
}
type Held = ReadonlySet<Relation>

export interface NewTake {
  id: string
  title: string
  tuneId?: string | undefined
  reach: Reach
  /** It was played over another take of the group: its bars are laid by that one's. */
  over?: PlayedOver | undefined
}

const pageSize = 50
const mimeOf: Record<Probe['container'], string> = {
  wav: 'audio/wav',
  mp3: 'audio/mpeg',
  flac: 'audio/flac',
  ogg: 'audio/ogg',
  mp4: 'audio/mp4',
  webm: 'audio/webm',
  aac: 'audio/aac',
  aiff: 'audio/aiff'
}
const encodeCursor = (take: StoredTake): string =>
  Buffer.from(JSON.stringify([take.createdAt, take.id])).toString('base64url')
const Cursor = z.tuple([Instant, Uuid])
const decodeCursor = (text: string | undefined): TakeCursor | null => {
  if (!text) return null
  try {
    const [createdAt, id] = Cursor.parse(JSON.parse(Buffer.from(text, 'base64url').toString()))
    return { createdAt, id }
  } catch {
    throw problem('invalid', { errors: [{ in: 'query', path: 'cursor', message: 'Not a place in this list.' }] })
  }
}

const uploaderHolds: Held = new Set<Relation>(['takeOwner'])

const withAbilities = (take: StoredTake, held: Held): Take => {
  const isUploader = held.has('takeOwner')
  // Who else was named is between the uploader and each of them.
  return { ...take, named: isUploader ? take.named : [], abilities: abilitiesOn('take', held) }
}

export const createTakeService = (deps: Deps) => {
  const { db, takes, tunes, access, groups, events, audit, storage, queue, playedOver, bounds } = deps

  const get = async (held: Held, takeId: string): Promise<Take> => {
    const take = await takes.find(takeId)
    if (!take) throw problem('not-found')
    return withAbilities(take, held)
  }
  const checkTune = async (tuneId: string | null | undefined, groupId: string): Promise<void> => {
    if (!tuneId) return
    const tune = await tunes.find(tuneId)
    if (tune?.groupId !== groupId)
      throw problem('invalid', {
        errors: [{ in: 'body', path: 'tuneId', message: 'There is no such tune in this group.' }]
      })
  }
  const readyManifest = async (takeId: string): Promise<PieceManifest> => {
    const manifest = await takes.manifest(takeId)
    // Says which of the two it is: no such take, or one that is still being read.
    if (!manifest) await readyMedia(takeId)
    if (!manifest) throw problem('not-ready')
    return manifest as PieceManifest
  }
  const readyMedia = async (takeId: string) => {
    const media = await takes.media(takeId)
    if (!media) throw problem('not-found')
    if (media.state !== 'ready') throw problem('not-ready', { detail: 'This recording is still being read.' })
    return media
  }

  return {
    get,
    /** A take as its uploader sees it. */
    own: (takeId: string): Promise<Take> => get(uploaderHolds, takeId),

    list: async (
      actor: Actor,
      held: Held,
      groupId: string,
      query: { tuneId?: string | undefined; cursor?: string | undefined }
    ): Promise<{ items: Take[]; cards: TakeCard[]; nextCursor: string | null }> => {
      const after = decodeCursor(query.cursor)
      const rows = await takes.audible(actor.id, groupId, { tuneId: query.tuneId, after, limit: pageSize + 1 })
      const shown = rows.slice(0, pageSize)
      const standings = await access.takeStandings(
        actor.id,
        shown.map((take) => take.id)
      )
      const items = shown.flatMap((take) => {
        const standing = standings.get(take.id)
        return standing ? [withAbilities(take, takeRelations(standing))] : []
      })
      const last = shown.at(-1)
      const cards = held.has('owner') && !after && !query.tuneId ? await cardsFor(actor, groupId) : []
      return { items, cards, nextCursor: rows.length > pageSize && last ? encodeCursor(last) : null }
    },

    /** From a file that is already on disk: probed before anything is kept, so that a wrong file leaves nothing behind. */
    create: async (actor: Actor, groupId: string, input: NewTake, file: UploadedFile): Promise<Take> => {
      const { over, ...said } = input
      const before = await takes.find(input.id)
      if (before) {
        if (before.groupId !== groupId || before.uploader.id !== actor.id) throw problem('already-there')
        return withAbilities(before, uploaderHolds)
      }
      await checkTune(input.tuneId, groupId)
      const probed = await probeRecording(file.path)
      if (!probed.ok) {
        throw problem('not-audio', {
          detail: probed.error.sentence,
          errors: [{ in: 'file', path: takeRoutes.upload.fileField ?? 'file', message: probed.error.sentence }]
        })
      }
      // The bytes lie safe before the row says they do; a crash between leaves a folder that the worker sweeps.
      await storage.keepOriginal(input.id, file.path)
      try {
        await db.transaction(async (trx) => {
          await stillAllowed(actor, 'group:add-take', { groupId }, groupId, trx)
          const used = await takes.usage(actor.id, groupId, trx)
          if (used.takes >= bounds.takesPerMember || used.bytes + file.bytes > bounds.bytesPerMember) {
            throw problem('over-quota', {
              detail: 'Your takes in this group have used up their room. Delete some first.'
            })
          }
          if (over) await playedOver.check(actor, over, groupId, trx)
          await takes.insert(
            {
              ...said,
              tuneId: said.tuneId ?? null,
              overTakeId: over?.takeId ?? null,
              groupId,
              uploaderId: actor.id,
              bytes: file.bytes,
              mime: mimeOf[probed.value.container]
            },
            trx
          )
          await events.add(
            { groupId, type: 'take:created', objectId: input.id, takeId: input.id, actorId: actor.id },
            trx
          )
          if (over)
            await playedOver.layBars(actor, { id: input.id, groupId, durationSec: probed.value.durationSec }, over, trx)
          await queue.ingest(input.id, trx)
        })
      } catch (error) {
        // Sent twice at once: the other one won and its bytes are the same take's.
        const winner = await takes.find(input.id)
        if (winner?.uploader.id === actor.id) return withAbilities(winner, uploaderHolds)
        if (!winner) await storage.removeTake(input.id)
        throw error
      }
      return get(uploaderHolds, input.id)
    },

    update: async (
      actor: Actor,
      held: Held,
      takeId: string,
      change: {
        title?: string | undefined
        tuneId?: string | null | undefined
        reach?: Reach | undefined
        namedIds?: string[] | undefined
      }
    ): Promise<Take> => {
      const home = await takes.home(takeId)
      if (!home) throw problem('not-found')
      await checkTune(change.tuneId, home.groupId)
      await db.transaction(async (trx) => {
        await stillAllowed(actor, 'take:edit', { takeId }, home.groupId, trx)
        await takes.update(takeId, change, trx)
        if (change.namedIds) {
          const inGroup = new Set((await groups.members(home.groupId, trx)).map((member) => member.id))
          if (change.namedIds.some((id) => !inGroup.has(id))) {
            throw problem('invalid', {
              errors: [{ in: 'body', path: 'namedIds', message: 'Somebody named here is not in the group.' }]
            })
          }
          await takes.setNames(takeId, change.namedIds, trx)
        }
        await events.add(
          { groupId: home.groupId, type: 'take:updated', objectId: takeId, takeId, actorId: actor.id },
          trx
        )
      })
      return get(held, takeId)
    },

    remove: async (actor: Actor, takeId: string, asker: Asker): Promise<void> => {
      const home = await takes.home(takeId)
      if (!home) throw problem('not-found')
      await db.transaction(async (trx) => {
        await stillAllowed(actor, 'take:delete', { takeId }, home.groupId, trx)
        await takes.remove(takeId, trx)
        await events.add(
          { groupId: home.groupId, type: 'take:removed', objectId: takeId, takeId, actorId: actor.id },
          trx
        )
        await audit.add(
          {
            what: 'take-deleted',
            actorId: actor.id,
            objectId: takeId,
            groupId: home.groupId,
            address: asker.address,
            requestId: asker.requestId
          },
          trx
        )
      })
      // The row is gone for good; files that resist are swept by the worker later.
      await storage.removeTake(takeId)
    },

    retry: async (actor: Actor, held: Held, takeId: string): Promise<Take> => {
      const take = await takes.find(takeId)
      if (!take) throw problem('not-found')
      if (take.state !== 'failed') return withAbilities(take, held)
      if (!(await storage.find(takeId, { kind: 'original' })))
        throw problem('gone', { detail: 'The file was not kept because it cannot be read. Send another.' })
      await db.transaction(async (trx) => {
        await stillAllowed(actor, 'take:edit', { takeId }, take.groupId, trx)
        // Asked twice at once, it waits once.
        if ((await takes.find(takeId, trx))?.state !== 'failed') return
        await takes.setWaiting(takeId, trx)
        await events.add(
          { groupId: take.groupId, type: 'take:updated', objectId: takeId, takeId, actorId: actor.id },
          trx
        )
        await queue.ingest(takeId, trx)
      })
      return get(held, takeId)
    },

    audio: async (takeId: string): Promise<FileAnswer> => {
      const media = await readyMedia(takeId)
      return {
        file: storage.pathOf(takeId, { kind: 'rendition' }),
        mime: media.renditionMime ?? 'audio/mp4',
        maxAgeSec: 0
      }
    },
    original: async (takeId: string): Promise<FileAnswer> => {
      const media = await readyMedia(takeId)
      return {
        file: storage.pathOf(takeId, { kind: 'original' }),
        mime: media.originalMime ?? 'application/octet-stream',
        downloadName: media.title
      }
    },
    peaks: async (takeId: string): Promise<FileAnswer> => {
      await readyMedia(takeId)
      return { file: storage.pathOf(takeId, { kind: 'peaks' }), mime: 'application/octet-stream', maxAgeSec: 0 }
    },
    pieces: async (takeId: string): Promise<PiecesManifest> => {
      const manifest = await readyManifest(takeId)
      return {
        ...manifest,
        pieces: manifest.pieces.map((piece, index) => ({
          ...piece,
          url: addressOf(takeRoutes.piece, { params: { takeId, index } })
        }))
      }
    },
    piece: async (takeId: string, index: number): Promise<FileAnswer> => {
      const manifest = await readyManifest(takeId)
      if (!manifest.pieces[index]) throw problem('not-found')
      return { file: storage.pathOf(takeId, { kind: 'piece', piece: index }), mime: manifest.mime, maxAgeSec: 0 }
    },

    barMapPlace: async (actor: Actor, takeId: string): Promise<DocumentPlace> => {
      const home = await takes.home(takeId)
      if (!home) throw problem('not-found')
      return {
        groupId: home.groupId,
        home: { takeId },
        event: 'bar-map:edited',
        recheck: (trx) => stillAllowed(actor, 'take:edit-bars', { takeId }, home.groupId, trx)
      }
    }
  }

  async function cardsFor(actor: Actor, groupId: string): Promise<TakeCard[]> {
    const every = await takes.ofGroup(groupId)
    const standings = await access.takeStandings(
      actor.id,
      every.map((take) => take.id)
    )
    return every.flatMap((take) => {
      const standing = standings.get(take.id)
      const held = standing ? takeRelations(standing) : null
      if (!held || abilitiesOn('take', held).includes('take:read')) return []
      return [
        {
          id: take.id,
          title: take.title,
          uploader: take.uploader,
          durationSec: take.durationSec,
          createdAt: take.createdAt,
          abilities: abilitiesOn('take', held)
        }
      ]
    })
  }
}
export type TakeService = ReturnType<typeof createTakeService>
