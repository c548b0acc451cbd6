// The recording that is being tried out. It stays in this browser: in memory while walking about, and in IndexedDB so
// that neither the way through signing in nor a reload loses it.
import { useSyncExternalStore } from 'react'
import { type DBSchema, type IDBPDatabase, openDB } from 'idb'
import { freshId } from '@client/lib/ids'

export interface Trial {
  /** The id of the take it becomes when it is kept: keeping it twice makes one take. */
  id: string
  file: File
  /** ms since 1970. */
  openedMs: number
  /** Known for what was recorded here: such files do not say how long they are. */
  durationSec?: number
}

interface Schema extends DBSchema {
  file: { key: 'only'; value: Trial }
}

/** A shared computer does not keep somebody's playing for longer than this. */
export const trialKeepsMs = 24 * 3600 * 1000

let opened: Promise<IDBPDatabase<Schema>> | null = null
const database = (): Promise<IDBPDatabase<Schema>> => {
  opened ??= openDB<Schema>('plumbline-trial', 1, { upgrade: (db) => void db.createObjectStore('file') })
  return opened
}
/** Private windows may have no IndexedDB, and a disk may be full: then it lives as long as the page. */
const guarded = async <T>(work: (db: IDBPDatabase<Schema>) => Promise<T>, otherwise: T): Promise<T> => {
  try {
    return await work(await database())
  } catch {
    return otherwise
  }
}

/** undefined: not looked for yet. */
let current: Trial | null | undefined
const listeners = new Set<() => void>()
const set = (next: Trial | null): void => {
  current = next
  for (const listener of listeners) listener()
}

export const openTrial = (file: File, openedMs: number, durationSec?: number): void => {
  const trial: Trial = { id: freshId(), file, openedMs, ...(durationSec ? { durationSec } : {}) }
  set(trial)
  void guarded(async (db) => {
    await db.put('file', trial, 'only')
  }, undefined)
}

export const dropTrial = (): void => {
  set(null)
  void guarded((db) => db.delete('file', 'only'), undefined)
}

/** Looks for what an earlier page left; once. */
export const findTrial = async (nowMs: number): Promise<void> => {
  if (current !== undefined) return
  const found = await guarded((db) => db.get('file', 'only'), undefined)
  if (current !== undefined) return
  if (found && nowMs - found.openedMs > trialKeepsMs) dropTrial()
  else set(found ?? null)
}

const subscribe = (listener: () => void) => {
  listeners.add(listener)
  return () => listeners.delete(listener)
}
export const useTrial = (): Trial | null | undefined => useSyncExternalStore(subscribe, () => current)
