// Pieces of recordings that the server has not acknowledged yet.
import { createPieceStore, type PieceStore, unheld } from '@client/lib/piece-store'

/** A recording that has begun and was neither kept nor thrown away. */
export interface Begun {
  id: string
  /** Who records; null before signing in: then all pieces stay here. */
  ownerId: string | null
  groupId: string | null
  mime: string
  startedMs: number
  /** Pieces there are, and seconds they hold. */
  pieces: number
  lengthSec: number
}

export type RecordingStore = PieceStore<Begun>

export const browserPieceStore: RecordingStore = createPieceStore<Begun>('plumbline-recordings')

/** Recordings of this person that no page is at work on, newest first. */
export const unfinishedOf = async (
  ownerId: string | null,
  store: RecordingStore = browserPieceStore
): Promise<Begun[]> => unheld((await store.list()).filter((one) => one.ownerId === ownerId && one.pieces > 0))
