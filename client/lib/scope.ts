// One lifetime for everything that must end: listeners, timers, frames, observers, subscriptions.
// Nothing outside this file adds a listener or asks for a frame, so that the leak test can count.
import { useEffect } from 'react'
import type { DependencyList } from 'react'

export type Dispose = () => void

type EventMapOf<T> = T extends Window
  ? WindowEventMap
  : T extends Document
    ? DocumentEventMap
    : T extends HTMLMediaElement
      ? HTMLMediaElementEventMap
      : T extends HTMLElement
        ? HTMLElementEventMap
        : T extends MediaQueryList
          ? MediaQueryListEventMap
          : Record<string, Event>

interface Observer<T, O> {
  observe(target: T, options?: O): void
  disconnect(): void
}

export interface Scope {
  readonly disposed: boolean
  /** Aborted when the scope ends: hand it to fetch and other abortable work. */
  readonly signal: AbortSignal
  listen<T extends EventTarget, K extends keyof EventMapOf<T> & string>(
    target: T,
    type: K,
    listener: (event: EventMapOf<T>[K]) => void,
    options?: AddEventListenerOptions
  ): Dispose
  timeout(run: () => void, afterMs: number): Dispose
  interval(run: () => void, everyMs: number): Dispose
  /** One animation frame; `run` gets the frame's time in ms. */
  frame(run: (nowMs: number) => void): Dispose
  /** Every animation frame until disposed. */
  eachFrame(run: (nowMs: number) => void): Dispose
  observe<T, O>(observer: Observer<T, O>, target: T, options?: O): Dispose
  /** Adopts any other ending (an unsubscribe function, a `dispose`). Runs at once if the scope has already ended. */
  add(dispose: Dispose): Dispose
  /** A scope that ends with this one, or earlier. */
  child(): Scope
  dispose: Dispose
}

let live = 0

/** Scopes made and not yet disposed. */
export const liveScopes = (): number => live

export function createScope(): Scope {
  const endings = new Set<Dispose>()
  const abort = new AbortController()
  live += 1

  // Returns the early ending: runs once, and forgets itself so that long-lived scopes do not grow.
  const add = (ending: Dispose): Dispose => {
    if (abort.signal.aborted) {
      ending()
      return () => undefined
    }
    const once = () => {
      if (endings.delete(once)) ending()
    }
    endings.add(once)
    return once
  }

  const scope: Scope = {
    get disposed() {
      return abort.signal.aborted
    },
    signal: abort.signal,
    listen(target, type, listener, options) {
      if (abort.signal.aborted) return () => undefined
      const handler = listener as EventListener
      target.addEventListener(type, handler, options)
      return add(() => target.removeEventListener(type, handler, options))
    },
    timeout(run, afterMs) {
      if (abort.signal.aborted) return () => undefined
      const id = setTimeout(() => {
        end()
        run()
      }, afterMs)
      const end = add(() => clearTimeout(id))
      return end
    },
    interval(run, everyMs) {
      if (abort.signal.aborted) return () => undefined
      const id = setInterval(run, everyMs)
      return add(() => clearInterval(id))
    },
    frame(run) {
      if (abort.signal.aborted) return () => undefined
      const id = requestAnimationFrame((nowMs) => {
        end()
        run(nowMs)
      })
      const end = add(() => cancelAnimationFrame(id))
      return end
    },
    eachFrame(run) {
      if (abort.signal.aborted) return () => undefined
      let id = 0
      let running = true
      const step = (nowMs: number) => {
        run(nowMs)
        if (running) id = requestAnimationFrame(step)
      }
      id = requestAnimationFrame(step)
      return add(() => {
        running = false
        cancelAnimationFrame(id)
      })
    },
    observe(observer, target, options) {
      if (abort.signal.aborted) return () => undefined
      observer.observe(target, options)
      return add(() => observer.disconnect())
    },
    add,
    child() {
      const inner = createScope()
      const release = add(inner.dispose)
      inner.add(release)
      return inner
    },
    dispose() {
      if (abort.signal.aborted) return
      live -= 1
      abort.abort()
      const faults: unknown[] = []
      // Last made, first ended: later things may lean on earlier ones.
      for (const once of [...endings].toReversed()) {
        try {
          once()
        } catch (fault) {
          faults.push(fault)
        }
      }
      if (faults.length === 1) throw faults[0]
      if (faults.length > 1) throw new AggregateError(faults, 'several endings failed')
    }
  }
  return scope
}

/** An effect whose listeners, timers and subscriptions end with the component or before the next run. */
export function useScope(effect: (scope: Scope) => void, deps: DependencyList): void {
  useEffect(() => {
    const scope = createScope()
    try {
      effect(scope)
    } catch (fault) {
      scope.dispose()
      throw fault
    }
    return scope.dispose
    // The caller names the dependencies, as with useEffect itself.
    // oxlint-disable-next-line react-hooks/exhaustive-deps
  }, deps)
}
