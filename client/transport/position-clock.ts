// A media element tells its position in steps of up to a few tens of milliseconds. Between the steps the clock goes on,
// so that a line drawn at the position moves evenly and never backwards.
import type { Sec } from '@shared/units'

/** Farther apart than this, the element is right and the clock wrong (waiting for data, a jump). */
const trustSec = 0.08

export interface PositionClock {
  /** `raw` is what the element says at `now`. */
  read(raw: Sec, now: Sec, rate: number): Sec
  /** Starts afresh: after a jump, a pause, a change of speed. */
  reset(): void
}

export const createPositionClock = (): PositionClock => {
  let anchor: { position: Sec; now: Sec; raw: Sec; told: Sec } | null = null
  return {
    read: (raw, now, rate) => {
      if (!anchor) {
        anchor = { position: raw, now, raw, told: raw }
        return raw
      }
      const expected = anchor.position + (now - anchor.now) * rate
      const off = raw - expected
      if (Math.abs(off) > trustSec) {
        anchor = { position: raw, now, raw, told: raw }
        return raw
      }
      // The step itself is news; an unchanged number is not.
      const position = raw === anchor.raw ? expected : expected + off * 0.1
      const told = Math.max(anchor.told, position)
      anchor = { position, now, raw, told }
      return told
    },
    reset: () => {
      anchor = null
    }
  }
}
