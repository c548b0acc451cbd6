// Which moment of the audio context is heard right now. The context counts in blocks, the loudspeaker comes later.
import type { Sec } from '@shared/units'

type ClockedContext = Pick<AudioContext, 'currentTime' | 'state' | 'baseLatency' | 'outputLatency'> &
  Partial<Pick<AudioContext, 'getOutputTimestamp'>>

/** Farther off than this the smoothed clock is wrong (another device, a wake from sleep), not the reading. */
const trustSec = 0.03
/** Share of a reading's deviation that is taken in; readings come a frame of the screen apart. */
const follow = 0.05
/** No device is later than this; a stamp that says so is broken. */
const latestSec = 1

const finite = (value: number | undefined): number => (value !== undefined && Number.isFinite(value) ? value : 0)

/** What the context itself says, unsmoothed. `now` is performance.now() in seconds. */
const reading = (context: ClockedContext, now: Sec): Sec => {
  const { currentTime } = context
  const stamp = context.getOutputTimestamp?.()
  if (stamp?.contextTime !== undefined && stamp.performanceTime !== undefined && stamp.performanceTime > 0) {
    const heard = stamp.contextTime + (now - stamp.performanceTime / 1000)
    // The stamp may go on counting a little past a context that has just been stopped.
    if (heard <= currentTime + 0.05 && heard > currentTime - latestSec) return heard
  }
  return currentTime - finite(context.outputLatency) - (context.outputLatency ? 0 : finite(context.baseLatency))
}

/** Smooth and never backwards while the context runs; stands where it stands while it does not. */
export const createOutputClock = (context: ClockedContext, now: () => Sec = () => performance.now() / 1000) => {
  /** Heard time minus `now`. */
  let offset: number | null = null
  let last = 0
  return {
    heard: (): Sec => {
      const at = now()
      const raw = reading(context, at)
      if (context.state !== 'running') {
        offset = null
        return Math.max(0, raw)
      }
      const difference = raw - at
      const isNear = offset !== null && Math.abs(difference - offset) < trustSec
      const isFresh = !isNear
      offset = offset !== null && isNear ? offset + follow * (difference - offset) : difference
      const heard = at + offset
      last = isFresh ? heard : Math.max(last, heard)
      return Math.max(0, last)
    },
    /** The device may be another one now. */
    reset: (): void => {
      offset = null
    }
  }
}
export type OutputClock = ReturnType<typeof createOutputClock>
