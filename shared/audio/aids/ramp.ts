// A value that moves to where it is sent in a straight line, so that nothing audible jumps.

export interface Ramp {
  /** Where it is: what the last `next` gave. */
  readonly value: number
  readonly target: number
  /** Has arrived; then `next` gives the target itself, bit for bit. */
  readonly isSettled: boolean
  /** Goes there from where it is, over the whole length anew. */
  set(target: number): void
  /** Is there at once. */
  jump(target: number): void
  /** The value of the next frame. */
  next(): number
}

/** A ramp that takes `frames` frames (at least one) from wherever it is to its target. Allocates nothing once made. */
export const createRamp = (initial: number, frames: number): Ramp => {
  const length = Math.max(1, Math.round(frames))
  let [value, target, step, left] = [initial, initial, 0, 0]
  return {
    get value() {
      return value
    },
    get target() {
      return target
    },
    get isSettled() {
      return left === 0
    },
    set(to) {
      if (to === target) return
      target = to
      left = length
      step = (target - value) / length
    },
    jump(to) {
      value = target = to
      left = 0
    },
    next() {
      if (left === 0) return value
      left -= 1
      value = left === 0 ? target : value + step
      return value
    }
  }
}

/** Amplitude factor of a level in decibels: 0 dB is exactly 1. */
export const amplitudeOf = (db: number): number => 10 ** (db / 20)
