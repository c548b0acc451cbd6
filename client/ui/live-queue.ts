// Spoken news at a pace that can be listened to: the first at once, then at most one every `gapMs`,
// what came in between told together.
import type { Scope } from '@client/lib/scope'

export interface LiveQueue {
  say(message: string): void
}

/** Told at once: this many; of the rest only the count. */
const togetherAtMost = 3

export function createLiveQueue(scope: Scope, speak: (text: string) => void, gapMs = 5000): LiveQueue {
  let waiting: string[] = []
  let isResting = false

  function tell() {
    if (waiting.length === 0) {
      isResting = false
      return
    }
    const untold = waiting.length - togetherAtMost
    const told = waiting.slice(-togetherAtMost)
    speak([untold > 0 ? `${untold} more before:` : '', ...told].filter(Boolean).join(' '))
    waiting = []
    isResting = true
    scope.timeout(tell, gapMs)
  }

  return {
    say(message) {
      if (waiting.at(-1) === message) return
      waiting.push(message)
      if (!isResting) tell()
    }
  }
}
