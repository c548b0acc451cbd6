// Which takes a person has opened from their first screen, kept in this browser. Only ids and one moment.
import { useEffect, useState } from 'react'
import { type DBSchema, openDB } from 'idb'
import { firstVisitMs, type Heard } from './waiting-for'

interface Schema extends DBSchema {
  heard: { key: string; value: Heard }
}

/** Older ids fall off: by then they are before the moment anyhow. */
const atMost = 500

const database = () => openDB<Schema>('plumbline-home', 1, { upgrade: (db) => void db.createObjectStore('heard') })

const load = async (personId: string): Promise<Heard | undefined> => {
  try {
    return await (await database()).get('heard', personId)
  } catch {
    return undefined
  }
}
const store = async (personId: string, heard: Heard): Promise<void> => {
  try {
    await (await database()).put('heard', heard, personId)
  } catch {
    // A private window without IndexedDB: the list is then the same again next time.
  }
}

/** null until it is known. */
export const useHeard = (personId: string) => {
  const [heard, setHeard] = useState<Heard | null>(null)
  useEffect(() => {
    let isOver = false
    void load(personId).then((found) => {
      if (isOver) return
      const known = found ?? { sinceMs: Date.now() - firstVisitMs, takeIds: [] }
      if (!found) void store(personId, known)
      setHeard(known)
    })
    return () => {
      isOver = true
    }
  }, [personId])
  const keep = (next: Heard): void => {
    setHeard(next)
    void store(personId, next)
  }
  return {
    heard,
    markHeard: (takeId: string): void => {
      if (heard) keep({ ...heard, takeIds: [...heard.takeIds.slice(1 - atMost), takeId] })
    },
    clear: (): void => keep({ sinceMs: Date.now(), takeIds: [] })
  }
}
