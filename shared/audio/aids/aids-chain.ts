// What lies between the stretched sound and the limiter: channel choice, low focus, loudness gain.
import type { Aids } from '@shared/audio/listening'
import { createChannelChoice } from './channel-choice.ts'
import { createLowFocus } from './low-focus.ts'
import { amplitudeOf, createRamp } from './ramp.ts'

/** Loudness gain moves so slowly that another take's never sounds like a knock. */
const GAIN_SEC = 0.05
/** Wider than any take brought to the moderate level needs; the least is silence, for a click alone. */
const GAIN_DB = { min: -120, max: 18 }

export interface AidsChain {
  /** Samples pass untouched, bit for bit. */
  readonly isNeutral: boolean
  /**
   * Chosen aids (octave and cents are the stretcher's) and the take's loudness gain in dB (EBU R 128: towards the moderate
   * level, as measured by ITU-R BS.1770); without `gainDb` the gain stays. Before the first frame it holds at once, then it
   * fades in.
   */
  set(aids: Aids, gainDb?: number): void
  /** For a jump that is silent anyway (a new take): no fades under way, no memory of what ran before. */
  reset(): void
  /** Works on the frames `from` (included) to `to` (excluded) of every channel, in place; allocates nothing. */
  process(channels: readonly Float32Array[], from: number, to: number): void
}

/** The chain for `channels` channels. Mono knows no sides: the channel choice does nothing there. */
export const createAidsChain = (sampleRate: number, channels: number): AidsChain => {
  const choice = createChannelChoice(sampleRate)
  const focus = createLowFocus(sampleRate, channels)
  const gain = createRamp(1, GAIN_SEC * sampleRate)
  let hasRun = false

  const isGainIdle = () => gain.isSettled && gain.value === 1
  const reset = (): void => {
    choice.settle()
    focus.settle()
    gain.jump(gain.target)
  }

  return {
    get isNeutral() {
      return (channels !== 2 || choice.isIdle) && focus.isIdle && isGainIdle()
    },
    set(aids, gainDb) {
      choice.set(aids.channel)
      focus.set(aids.lowFocus)
      if (gainDb !== undefined) {
        const db = Number.isFinite(gainDb) ? gainDb : 0
        gain.set(amplitudeOf(Math.min(GAIN_DB.max, Math.max(GAIN_DB.min, db))))
      }
      if (!hasRun) reset()
    },
    reset,
    process(samples, from, to) {
      hasRun = true
      const [left, right] = samples
      if (channels === 2 && left && right && !choice.isIdle) choice.process(left, right, from, to)
      if (!focus.isIdle) focus.process(samples, from, to)
      if (isGainIdle()) return
      for (let i = from; i < to; i += 1) {
        const factor = gain.next()
        for (let c = 0; c < samples.length; c += 1) {
          const channel = samples[c] as Float32Array
          channel[i] = (channel[i] as number) * factor
        }
      }
    }
  }
}
