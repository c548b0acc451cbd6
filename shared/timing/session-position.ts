import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'

/** What a listening session shares: where the playhead was at a moment of the server, and how it has gone on since. */
export interface SharedPlayback {
  positionSec: Sec
  /** Take seconds a second: 0.5 is half speed. */
  rate: number
  playing: boolean
  loop: Span | null
  atServerMs: number
  durationSec: Sec
}

export interface SharedPlace {
  positionSec: Sec
  /** False too when the take has come to its end meanwhile. */
  playing: boolean
  /** How often the loop has begun again since. */
  loops: number
}

/**
 * Where the shared playhead is at a moment of the server's clock. Inside or before the loop it comes round at the loop's end;
 * set beyond the loop it plays on to the end of the take and stops there. A moment before the state was set counts as that.
 */
export const sessionPosition = (state: SharedPlayback, serverNowMs: number): SharedPlace => {
  const durationSec = Math.max(0, finite(state.durationSec))
  const startSec = clamp(finite(state.positionSec), durationSec)
  const rate = Math.max(0, finite(state.rate))
  const elapsedSec = Math.max(0, finite(serverNowMs - state.atServerMs)) / 1000
  if (!state.playing || rate === 0) return { positionSec: startSec, playing: state.playing, loops: 0 }

  const positionSec = startSec + elapsedSec * rate
  const loop = state.loop && soundLoop(state.loop, durationSec)
  if (loop && startSec < loop.endSec) {
    if (positionSec < loop.endSec) return { positionSec, playing: true, loops: 0 }
    const lengthSec = loop.endSec - loop.startSec
    const over = positionSec - loop.endSec
    // Rounding may give a rest as long as the loop itself, which is its start.
    const rest = over % lengthSec
    const wrapped = loop.startSec + rest
    return {
      positionSec: wrapped < loop.endSec ? wrapped : loop.startSec,
      playing: true,
      loops: 1 + Math.floor(over / lengthSec)
    }
  }
  return { positionSec: Math.min(positionSec, durationSec), playing: positionSec < durationSec, loops: 0 }
}

// Shorter than this a loop is a slip of the hand and would only buzz.
const MIN_LOOP_SEC = 0.02

const soundLoop = ({ startSec, endSec }: Span, durationSec: Sec): Span | null => {
  const loop = { startSec: clamp(finite(startSec), durationSec), endSec: clamp(finite(endSec), durationSec) }
  return loop.endSec - loop.startSec >= MIN_LOOP_SEC ? loop : null
}

const finite = (value: number): number => (Number.isFinite(value) ? value : 0)
const clamp = (sec: Sec, durationSec: Sec): Sec => Math.min(Math.max(0, sec), durationSec)
