// Pieces of recordings that the server has not acknowledged yet, in IndexedDB, so that a closed lid loses seconds.
import { type DBSchema, type IDBPDatabase, openDB } from 'idb'

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

interface Schema extends DBSchema {
  begun: { key: string; value: Begun }
  pieces: { key: [string, number]; value: Blob }
}

export interface PieceStore {
  putBegun(begun: Begun): Promise<void>
  putPiece(id: string, index: number, piece: Blob): Promise<void>
  piece(id: string, index: number): Promise<Blob | null>
  removePiece(id: string, index: number): Promise<void>
  /** The recording and all its pieces. */
  remove(id: string): Promise<void>
  list(): Promise<Begun[]>
}

let opened: Promise<IDBPDatabase<Schema>> | null = null
const database = (): Promise<IDBPDatabase<Schema>> => {
  opened ??= openDB<Schema>('plumbline-recordings', 1, {
    upgrade: (db) => {
      db.createObjectStore('begun', { keyPath: 'id' })
      db.createObjectStore('pieces')
    }
  })
  return opened
}
/** Without IndexedDB (private windows of some browsers) a recording lives in memory and on the server only. */
const guarded = async <T>(work: (db: IDBPDatabase<Schema>) => Promise<T>, otherwise: T): Promise<T> => {
  try {
    return await work(await database())
  } catch {
    return otherwise
  }
}

export const browserPieceStore: PieceStore = {
  putBegun: (begun) => guarded(async (db) => void (await db.put('begun', begun)), undefined),
  putPiece: (id, index, piece) => guarded(async (db) => void (await db.put('pieces', piece, [id, index])), undefined),
  piece: (id, index) => guarded(async (db) => (await db.get('pieces', [id, index])) ?? null, null),
  removePiece: (id, index) => guarded((db) => db.delete('pieces', [id, index]), undefined),
  remove: (id) =>
    guarded(async (db) => {
      const work = db.transaction(['begun', 'pieces'], 'readwrite')
      await work.objectStore('begun').delete(id)
      await work.objectStore('pieces').delete(IDBKeyRange.bound([id, 0], [id, Infinity]))
      await work.done
    }, undefined),
  list: () => guarded((db) => db.getAll('begun'), [])
}

const lockName = (id: string): string => `plumbline-recording-${id}`

/** Holds the recording for this page, so that another tab does not take it for an unfinished one. */
export const holdRecording = (id: string): (() => void) => {
  let release = (): void => undefined
  const held = new Promise<void>((resolve) => {
    release = resolve
  })
  void navigator.locks?.request(lockName(id), () => held)
  return () => release()
}

/** Recordings of this person that no page is at work on, newest first. */
export const unfinishedOf = async (ownerId: string | null, store: PieceStore = browserPieceStore): Promise<Begun[]> => {
  const [begun, locks] = await Promise.all([store.list(), navigator.locks?.query()])
  const held = new Set((locks?.held ?? []).map(({ name }) => name))
  return begun
    .filter((one) => one.ownerId === ownerId && one.pieces > 0 && !held.has(lockName(one.id)))
    .sort((a, b) => b.startedMs - a.startedMs)
}
