// Which part of a stereo picture is heard.
import type { Channel } from '@shared/audio/listening'
import { createRamp, type Ramp } from './ramp.ts'

const SWITCH_SEC = 0.015

/** What of left and right goes into the left and the right output: left from left, left from right, right from left, ... */
type Weights = readonly [number, number, number, number]

/** One side alone is heard on both ears, as are the middle (L + R) / 2 and the sides (L - R) / 2. */
const weightsOf: Record<Channel, Weights> = {
  both: [1, 0, 0, 1],
  left: [1, 0, 1, 0],
  right: [0, 1, 0, 1],
  middle: [0.5, 0.5, 0.5, 0.5],
  sides: [0.5, -0.5, 0.5, -0.5]
}

export interface ChannelChoice {
  /** Nothing to do: both sides as they are. */
  readonly isIdle: boolean
  set(channel: Channel): void
  /** As set, at once. */
  settle(): void
  /** In place. */
  process(left: Float32Array, right: Float32Array, from: number, to: number): void
}

/** Chooses by a 2 x 2 matrix whose entries move in 15 ms: a linear crossfade from any choice to any other, at any moment. */
export const createChannelChoice = (sampleRate: number): ChannelChoice => {
  const ramps = weightsOf.both.map((weight) => createRamp(weight, SWITCH_SEC * sampleRate))
  const [leftLeft, leftRight, rightLeft, rightRight] = ramps as [Ramp, Ramp, Ramp, Ramp]
  let chosen: Channel = 'both'
  return {
    get isIdle() {
      return (
        chosen === 'both' && leftLeft.isSettled && leftRight.isSettled && rightLeft.isSettled && rightRight.isSettled
      )
    },
    set(channel) {
      chosen = channel
      ramps.forEach((ramp, i) => ramp.set(weightsOf[channel][i] as number))
    },
    settle: () => ramps.forEach((ramp) => ramp.jump(ramp.target)),
    process(left, right, from, to) {
      for (let i = from; i < to; i += 1) {
        const l = left[i] as number
        const r = right[i] as number
        left[i] = leftLeft.next() * l + leftRight.next() * r
        right[i] = rightLeft.next() * l + rightRight.next() * r
      }
    }
  }
}
