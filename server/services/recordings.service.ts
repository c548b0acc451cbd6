// A recording made in the browser arrives piece by piece while it is made, so that a closed lid loses seconds, not the take.
import { randomUUID } from 'node:crypto'
import { mkdir, open, rename, rm } from 'node:fs/promises'
import { join } from 'node:path'
import type { Take } from '@shared/contracts/takes'
import { problem } from '@shared/errors/problems'
import type { Bounds } from '@shared/limits'
import type { Db } from '@server/db/knex'
import type { Actor } from '@server/http/handlers'
import { joinRecording } from '@server/media/recording'
import type { MediaStorage } from '@server/media/storage'
import type { RecordingsRepo, StoredRecording } from '@server/repositories/recordings.repo'
import type { NewTake, TakeService } from '@server/services/takes.service'
import { stillAllowed } from '@server/services/still-allowed'

interface Deps {
  db: Db
  recordings: RecordingsRepo
  takes: Pick<TakeService, 'create' | 'own'>
  storage: Pick<MediaStorage, 'incomingFolder'>
  bounds: Pick<Bounds, 'uploadBytes' | 'openRecordings'>
}

const pieceName = (index: number): string => String(index).padStart(6, '0')

/** Writes a piece so that it is whole on the disk, or not there. */
const writePiece = async (path: string, bytes: AsyncIterable<Buffer>): Promise<number> => {
  // The same piece may arrive twice at once.
  const beside = `${path}.${randomUUID()}.part`
  const file = await open(beside, 'w', 0o600)
  let size = 0
  try {
    for await (const chunk of bytes) {
      await file.write(chunk)
      size += chunk.length
    }
    await file.sync()
  } catch (error) {
    await rm(beside, { force: true })
    throw error
  } finally {
    await file.close()
  }
  await rename(beside, path)
  return size
}

export const createRecordingService = ({ db, recordings, takes, storage, bounds }: Deps) => {
  const folderOf = async (id: string): Promise<string> => {
    const folder = join(await storage.incomingFolder(), `recording-${id}`)
    await mkdir(folder, { recursive: true })
    return folder
  }
  const known = async (id: string): Promise<StoredRecording> => {
    const recording = await recordings.find(id)
    if (!recording) throw problem('not-found')
    return recording
  }

  return {
    start: async (
      actor: Actor,
      groupId: string,
      input: { id: string; mime: string }
    ): Promise<{ id: string; nextPiece: number }> => {
      const before = await recordings.find(input.id)
      if (before) {
        if (before.uploaderId !== actor.id) throw problem('already-there')
        return { id: before.id, nextPiece: before.nextPiece }
      }
      await db.transaction(async (trx) => {
        await stillAllowed(actor, 'group:add-take', { groupId }, groupId, trx)
        if ((await recordings.openCount(actor.id, trx)) >= bounds.openRecordings)
          throw problem('over-quota', {
            detail: 'Too many recordings are waiting to be kept. Keep or drop some first.'
          })
        await recordings.insert({ ...input, groupId, uploaderId: actor.id }, trx)
      })
      return { id: input.id, nextPiece: 0 }
    },

    piece: async (id: string, index: number, bytes: AsyncIterable<Buffer>): Promise<{ nextPiece: number }> => {
      const recording = await known(id)
      if (recording.takeId) throw problem('already-there', { detail: 'This recording is kept already.' })
      if (recording.bytes >= bounds.uploadBytes) throw problem('too-large')
      if (index > recording.nextPiece) throw problem('conflict', { detail: `Piece ${recording.nextPiece} comes next.` })
      const size = await writePiece(join(await folderOf(id), pieceName(index)), bytes)
      if (index === recording.nextPiece) await recordings.countPiece(id, index, size)
      return { nextPiece: Math.max(recording.nextPiece, index + 1) }
    },

    finish: async (actor: Actor, id: string, input: NewTake & { pieces: number }): Promise<Take> => {
      const recording = await known(id)
      if (recording.takeId) return takes.own(recording.takeId)
      if (input.pieces !== recording.nextPiece) {
        throw problem('conflict', {
          detail: `${recording.nextPiece} of ${input.pieces} pieces have arrived. Send the others first.`
        })
      }
      const folder = await folderOf(id)
      // Finished twice at once, each has a file of its own; the take's id decides who was first.
      const target = join(folder, `whole-${randomUUID()}`)
      const pieces = Array.from({ length: recording.nextPiece }, (_, index) => join(folder, pieceName(index)))
      try {
        const joined = await joinRecording({ pieces, target, maxBytes: bounds.uploadBytes })
        if (!joined.ok) throw problem('not-audio', { detail: joined.error.sentence })
        const take = await takes.create(actor, recording.groupId, input, { path: target, bytes: joined.value.bytes })
        await recordings.setTake(id, take.id)
        await rm(folder, { recursive: true, force: true })
        return take
      } catch (error) {
        // The other one was through and has cleared the pieces away.
        const now = await recordings.find(id)
        if (now?.takeId) return takes.own(now.takeId)
        await rm(target, { force: true })
        throw error
      }
    },

    drop: async (id: string): Promise<void> => {
      await recordings.remove(id)
      await rm(await folderOf(id), { recursive: true, force: true })
    }
  }
}
export type RecordingService = ReturnType<typeof createRecordingService>
