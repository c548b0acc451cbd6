// A person's changes to the comments of one take on their way to the server: one after the other, kept until the server has
// them, waiting for the person when it refuses.
import { ApiProblem } from '@client/lib/api'
import type { PendingChange } from '@client/features/comments/changes'

export interface ChangeStore {
  list(): Promise<PendingChange[]>
  put(change: PendingChange): Promise<void>
  remove(id: string): Promise<void>
}

export interface ChangeQueueDeps {
  store: ChangeStore
  /** Throws ApiProblem. */
  send(change: PendingChange): Promise<void>
  now(): number
  wait(ms: number): Promise<void>
}

export interface ChangeQueue {
  /** The same array until something changes. */
  pending(): readonly PendingChange[]
  subscribe(listener: () => void): () => void
  push(change: PendingChange): void
  /** Takes a change back that has not gone out yet; false when it is too late. */
  takeBack(id: string): boolean
  /** Sends a refused change once more. */
  tryAgain(id: string): void
  /** Reads what an earlier visit left, and goes on sending. */
  wake(): Promise<void>
}

const firstDelayMs = 500
const longestDelayMs = 8000
const passing: ReadonlySet<string> = new Set(['offline', 'unavailable', 'too-many', 'internal'])

export const createChangeQueue = ({ store, send, now, wait }: ChangeQueueDeps): ChangeQueue => {
  const listeners = new Set<() => void>()
  let pending: readonly PendingChange[] = []
  let inFlight: string | null = null
  let isDraining = false
  /** Ends the nap of a queue that only holds back deletions. */
  let wakeUp = (): void => {}

  const set = (next: readonly PendingChange[]): void => {
    pending = next
    for (const listener of listeners) listener()
  }
  const drop = (id: string): void => {
    void store.remove(id)
    set(pending.filter((each) => each.id !== id))
  }
  const replace = (change: PendingChange): void => {
    void store.put(change)
    set(pending.map((each) => (each.id === change.id ? change : each)))
  }
  const isDue = ({ refused, notBeforeMs }: PendingChange): boolean => !refused && (notBeforeMs ?? 0) <= now()

  /** Milliseconds until something is due; null when nothing waits. */
  const nextDueMs = (): number | null => {
    const waiting = pending.flatMap(({ refused, notBeforeMs }) => (refused ? [] : [(notBeforeMs ?? 0) - now()]))
    return waiting.length > 0 ? Math.max(0, Math.min(...waiting)) : null
  }

  /** False when sending has to stop until the next `wake`. */
  const sendOne = async (change: PendingChange, delayMs: number): Promise<boolean> => {
    inFlight = change.id
    try {
      await send(change)
      drop(change.id)
      return true
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error
      if (error.code === 'sign-in-needed') return false
      if (passing.has(error.code)) await wait(delayMs)
      else if (error.code === 'not-found' && isDeletion(change)) drop(change.id)
      else replace({ ...change, refused: error.message })
      return true
    } finally {
      inFlight = null
    }
  }

  const drain = async (): Promise<void> => {
    if (isDraining) return
    isDraining = true
    let delayMs = firstDelayMs
    try {
      for (;;) {
        const change = pending.find(isDue)
        if (change) {
          const before = pending.length
          if (!(await sendOne(change, delayMs))) return
          delayMs = pending.length < before ? firstDelayMs : Math.min(delayMs * 2, longestDelayMs)
          continue
        }
        const dueMs = nextDueMs()
        if (dueMs === null) return
        await Promise.race([wait(Math.max(20, dueMs)), new Promise<void>((awake) => (wakeUp = awake))])
      }
    } finally {
      isDraining = false
    }
  }

  return {
    pending: () => pending,
    subscribe: (listener) => {
      listeners.add(listener)
      return () => listeners.delete(listener)
    },
    push: (change) => {
      void store.put(change)
      set([...pending, change])
      wakeUp()
      void drain()
    },
    takeBack: (id) => {
      if (inFlight === id || !pending.some((each) => each.id === id)) return false
      drop(id)
      return true
    },
    tryAgain: (id) => {
      const change = pending.find((each) => each.id === id)
      if (!change?.refused) return
      const { refused: _, ...again } = change
      replace(again)
      wakeUp()
      void drain()
    },
    wake: async () => {
      const kept = await store.list()
      const known = new Set(pending.map(({ id }) => id))
      const left = kept.filter(({ id }) => !known.has(id))
      if (left.length > 0) set([...left, ...pending])
      await drain()
    }
  }
}

const isDeletion = ({ change }: PendingChange): boolean => change.kind === 'remove' || change.kind === 'removeReply'
