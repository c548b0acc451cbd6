// Pieces of recordings that are not safe elsewhere yet, in IndexedDB, so that a closed lid loses seconds.
import { type DBSchema, type IDBPDatabase, openDB } from 'idb'

interface Schema<B extends { id: string }> extends DBSchema {
  begun: { key: string; value: B }
  pieces: { key: [string, number]; value: Blob }
}

export interface PieceStore<B extends { id: string }> {
  putBegun(begun: B): Promise<void>
  putPiece(id: string, index: number, piece: Blob): Promise<void>
  piece(id: string, index: number): Promise<Blob | null>
  removePiece(id: string, index: number): Promise<void>
  /** The recording and all its pieces. */
  remove(id: string): Promise<void>
  list(): Promise<B[]>
}

/** A database of its own under this name, opened when it is first used. */
export const createPieceStore = <B extends { id: string }>(name: string): PieceStore<B> => {
  let opened: Promise<IDBPDatabase<Schema<B>>> | null = null
  const database = (): Promise<IDBPDatabase<Schema<B>>> => {
    opened ??= openDB<Schema<B>>(name, 1, {
      upgrade: (db) => {
        db.createObjectStore('begun', { keyPath: 'id' })
        db.createObjectStore('pieces')
      }
    })
    return opened
  }
  /** Without IndexedDB (private windows of some browsers) a recording lives in memory only. */
  const guarded = async <T>(work: (db: IDBPDatabase<Schema<B>>) => Promise<T>, otherwise: T): Promise<T> => {
    try {
      return await work(await database())
    } catch {
      return otherwise
    }
  }
  return {
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

/** Those that no page is at work on, newest first. */
export const unheld = async <B extends { id: string; startedMs: number }>(begun: readonly B[]): Promise<B[]> => {
  const locks = await navigator.locks?.query()
  const held = new Set((locks?.held ?? []).map(({ name }) => name))
  return begun.filter(({ id }) => !held.has(lockName(id))).sort((a, b) => b.startedMs - a.startedMs)
}
