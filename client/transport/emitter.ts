// A small typed emitter for engines.
export interface Emitter<Events> {
  on<E extends keyof Events>(event: E, listener: (payload: Events[E]) => void): () => void
  emit<E extends keyof Events>(event: E, payload: Events[E]): void
  clear(): void
}

export const createEmitter = <Events>(): Emitter<Events> => {
  const listeners = new Map<keyof Events, Set<(payload: never) => void>>()
  return {
    on: (event, listener) => {
      const set = listeners.get(event) ?? new Set()
      listeners.set(event, set)
      set.add(listener)
      return () => void set.delete(listener)
    },
    emit: (event, payload) => {
      for (const listener of listeners.get(event) ?? []) (listener as (value: typeof payload) => void)(payload)
    },
    clear: () => listeners.clear()
  }
}
