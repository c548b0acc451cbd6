// Changes of preferences on their way to the server: seen at once, sent together a moment later, one request at a time.
import { changedPreferences, type PreferenceChange, type Preferences } from '@shared/practice/preferences'

export interface PreferenceChangesDeps {
  send(change: PreferenceChange): Promise<Preferences>
  /** Shows the document as it is to be; `before` is what is shown now, null where nothing is known yet. */
  show(update: (before: Preferences | null) => Preferences | null): void
  /** True where the same can be sent again; what is refused is given up. */
  isPassing(error: unknown): boolean
  /** Asked when a change was given up: what is shown may be wrong. */
  reload(): void
  /** Calls back after so many ms; gives the taking-back. */
  later(run: () => void, ms: number): () => void
}

/** A slider sends dozens of values a second: they are collected for this long, ms. */
export const collectMs = 400
const retryMs = 5000

export interface PreferenceChanges {
  change(change: PreferenceChange): void
  /** Sends what is waiting now: the page is about to go. */
  flush(): void
  /** Somebody else is signed in: what is waiting is not theirs. */
  drop(): void
}

export const createPreferenceChanges = (deps: PreferenceChangesDeps): PreferenceChanges => {
  let waiting: PreferenceChange = {}
  let sending: PreferenceChange | null = null
  let cancel: (() => void) | null = null
  const isWaiting = () => Object.keys(waiting).length > 0

  const sendLater = (ms: number): void => {
    cancel?.()
    cancel = deps.later(() => void send(), ms)
  }
  const send = async (): Promise<void> => {
    cancel?.()
    cancel = null
    if (sending || !isWaiting()) return
    const change = (sending = waiting)
    waiting = {}
    let wait = 0
    try {
      const kept = await deps.send(change)
      // Dropped meanwhile: the answer is about somebody who is gone.
      if (sending === change) deps.show(() => changedPreferences(kept, waiting))
    } catch (error) {
      if (sending === change && deps.isPassing(error)) {
        waiting = { ...change, ...waiting }
        wait = retryMs
      } else if (sending === change) deps.reload()
    }
    if (sending === change) sending = null
    if (isWaiting() && !cancel) sendLater(wait)
  }

  return {
    change: (change) => {
      waiting = { ...waiting, ...change }
      deps.show((before) => before && changedPreferences(before, change))
      sendLater(collectMs)
    },
    flush: () => void send(),
    drop: () => {
      cancel?.()
      cancel = null
      waiting = {}
      sending = null
    }
  }
}
