import { useEffect, useState } from 'react'
import { unheld } from '@client/lib/piece-store'
import { browserTryStore, type OneTry, type Recorded, type TryStore } from './try-store'

export interface ListedTry {
  recorded: Recorded
  one: OneTry
}

export interface Tries {
  /** In the order they were played. */
  listed: readonly ListedTry[]
  /** What the next one is called. */
  nextNumber: number
  add(recorded: Recorded): void
  /** Kept and safe elsewhere, or thrown away. */
  drop(tryId: string): void
}

/** The tries over one take that wait for a word, those of an earlier page too. */
export const useTries = (ownerId: string, takeId: string, store: TryStore = browserTryStore): Tries => {
  const [all, setAll] = useState<readonly Recorded[]>([])
  useEffect(() => {
    let isOver = false
    void store
      .list()
      .then((found) => unheld(found.filter((one) => one.ownerId === ownerId && one.takeId === takeId)))
      .then((found) => {
        if (isOver) return
        // A recording that broke off before the take began holds no try.
        for (const { id, tries } of found) if (tries.length === 0) void store.remove(id)
        setAll((now) => [...found.filter(({ id }) => !now.some((one) => one.id === id)), ...now])
      })
    return () => {
      isOver = true
    }
  }, [ownerId, takeId, store])

  const inOrder = [...all].sort((a, b) => a.startedMs - b.startedMs)
  return {
    listed: inOrder.flatMap((recorded) =>
      recorded.tries.filter(({ isGone }) => !isGone).map((one) => ({ recorded, one }))
    ),
    nextNumber: Math.max(0, ...all.flatMap(({ tries }) => tries.map(({ number }) => number))) + 1,
    add: (recorded) => setAll((now) => [...now, recorded]),
    drop: (tryId) =>
      setAll((now) =>
        now.map((recorded) => {
          if (!recorded.tries.some(({ id }) => id === tryId)) return recorded
          const tries = recorded.tries.map((one) => (one.id === tryId ? { ...one, isGone: true } : one))
          const next = { ...recorded, tries }
          if (tries.every(({ isGone }) => isGone)) void store.remove(recorded.id)
          else void store.putBegun(next)
          return next
        })
      )
  }
}
