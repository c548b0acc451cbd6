// A person as others see them, joined into rows under a prefix.
import type { Person } from '@shared/contracts/common'

export const person = (id: string, name: string): Person => ({ id, name })
export const personOrNull = (id: string | null, name: string | null): Person | null =>
  id && name !== null ? { id, name } : null
