// What was done here and has not reached the server yet, kept in IndexedDB so that a reload or a dead battery loses nothing.
// Keyed by person, so that whoever signs in next on this browser never sends what is not theirs.
import { type DBSchema, type IDBPDatabase, openDB } from 'idb'

interface Entry {
  id: string
  /** Who did it. */
  owner: string
  /** What it belongs to: a take's comments, a document … */
  place: string
  /** Order within the place. */
  at: number
  value: unknown
}
interface Schema extends DBSchema {
  unsent: { key: string; value: Entry; indexes: { place: [string, string]; owner: string } }
}

let opened: Promise<IDBPDatabase<Schema>> | null = null
const database = (): Promise<IDBPDatabase<Schema>> => {
  opened ??= openDB<Schema>('plumbline', 1, {
    upgrade: (db) => {
      const store = db.createObjectStore('unsent', { keyPath: 'id' })
      store.createIndex('place', ['owner', 'place'])
      store.createIndex('owner', 'owner')
    }
  })
  return opened
}

/** Private windows of some browsers have no IndexedDB: then things live as long as the page. */
const guarded = async <T>(work: (db: IDBPDatabase<Schema>) => Promise<T>, otherwise: T): Promise<T> => {
  try {
    return await work(await database())
  } catch {
    return otherwise
  }
}

export interface Unsent<T> {
  id: string
  value: T
}

export const outbox = {
  put: <T>(owner: string, place: string, id: string, value: T): Promise<void> =>
    guarded(async (db) => {
      await db.put('unsent', { id, owner, place, at: performance.timeOrigin + performance.now(), value })
    }, undefined),
  remove: (id: string): Promise<void> => guarded((db) => db.delete('unsent', id), undefined),
  /** In the order they were done. */
  list: <T>(owner: string, place: string): Promise<Unsent<T>[]> =>
    guarded(async (db) => {
      const entries = await db.getAllFromIndex('unsent', 'place', [owner, place])
      return entries.sort((a, b) => a.at - b.at).map(({ id, value }) => ({ id, value: value as T }))
    }, []),
  count: (owner: string): Promise<number> => guarded((db) => db.countFromIndex('unsent', 'owner', owner), 0)
}
