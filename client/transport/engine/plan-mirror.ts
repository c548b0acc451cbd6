// The worklet's plan as the page knows it, so that a place can be told for any moment of the audio clock.
import type { FromWorklet } from '@shared/audio/playback/messages'
import { mergeParts, partAt, placeIn } from '@shared/audio/playback/plan'
import type { PlanPart } from '@shared/audio/playback/plan-types'
import type { Sec } from '@shared/units'

/** What is heard lags behind what is rendered; parts are kept for longer than any device's delay. */
const keepSec = 30

export const createPlanMirror = (sampleRate: number, start: PlanPart) => {
  let parts: PlanPart[] = [start]
  /** Moment of the context at which the plan's frame 0 leaves it; null until the worklet has begun. */
  let zeroSec: Sec | null = null

  const frameOf = (contextSec: Sec): number => (zeroSec === null ? 0 : (contextSec - zeroSec) * sampleRate)
  return {
    take: (message: FromWorklet): void => {
      if (message.kind === 'start') zeroSec = message.startSec + message.delaySec
      if (message.kind === 'plan') parts = mergeParts(parts, message, keepSec * sampleRate)
    },
    get hasBegun() {
      return zeroSec !== null
    },
    /** Frame of the plan that leaves the context at a moment of it. */
    frameOf,
    partAt: (contextSec: Sec): PlanPart => partAt(parts, frameOf(contextSec)),
    /** Seconds of the take that leave the context at a moment of it. */
    placeAt: (contextSec: Sec): Sec => {
      const frame = frameOf(contextSec)
      return placeIn(partAt(parts, frame), frame) / sampleRate
    }
  }
}
export type PlanMirror = ReturnType<typeof createPlanMirror>
