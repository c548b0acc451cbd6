// Low focus: only the bass register, as loud as it was in the mix or a little louder.
import { lowFocusLimits, plainAids, type LowFocus } from '@shared/audio/listening'
import { amplitudeOf, createRamp } from './ramp.ts'
import { createCascade } from './cascade.ts'

/** Slopes of 48 dB an octave above, 12 dB an octave below. */
const LOW_PASS_ORDER = 8
const HIGH_PASS_ORDER = 2
/** Under the low B of a five-string bass (31 Hz): takes away rumble and steps, costs that B 2 dB. */
const RUMBLE_HZ = 28
/** Long against the filter's own delay (10 ms at a top of 80 Hz), short to the hand. */
const SWITCH_SEC = 0.04
const SWEEP_SEC = 0.03
/** What is missing above is made up for by at most so much, found over some seconds and never in a hurry. */
const MAX_MAKE_UP_DB = 6
const LISTEN_SEC = 1.5
const UP_DB_PER_SEC = 3
const DOWN_DB_PER_SEC = 24
const LOOK_FRAMES = 64

export interface LowFocusFilter {
  /** Nothing to do: off, and faded out. */
  readonly isIdle: boolean
  set(focus: LowFocus): void
  /** As set, at once, with no memory of what ran before. */
  settle(): void
  /** In place. */
  process(channels: readonly Float32Array[], from: number, to: number): void
}

/**
 * An 8th-order Butterworth low-pass at `topHz` (kept within `lowFocusLimits`) behind a gentle high-pass. On and off are
 * crossfades, another top is a sweep of the cutoff. Level: the pass band is left as it is, then raised slowly until the
 * filtered sound has the power of the unfiltered one, by at most 6 dB, so that neither switch makes a jump up: a bass alone
 * is not raised, a bass under a band is. Same result however the frames are split.
 */
export const createLowFocus = (sampleRate: number, channelCount: number): LowFocusFilter => {
  const topHz = createRamp(plainAids.lowFocus.topHz, SWEEP_SEC * sampleRate)
  const mix = createRamp(0, SWITCH_SEC * sampleRate)
  const lowPass = createCascade('low-pass', LOW_PASS_ORDER, sampleRate, channelCount, topHz.value)
  const highPass = createCascade('high-pass', HIGH_PASS_ORDER, sampleRate, channelCount, RUMBLE_HZ)
  const forget = Math.exp(-1 / (LISTEN_SEC * sampleRate))
  const up = amplitudeOf((UP_DB_PER_SEC * LOOK_FRAMES) / sampleRate)
  const down = amplitudeOf((-DOWN_DB_PER_SEC * LOOK_FRAMES) / sampleRate)
  const makeUp = createRamp(1, LOOK_FRAMES)
  let [plainPower, focusPower, sinceLook] = [0, 0, 0]

  const clear = (): void => {
    lowPass.clear()
    highPass.clear()
    makeUp.jump(1)
    plainPower = focusPower = sinceLook = 0
  }
  const isIdle = () => mix.isSettled && mix.value === 0

  /** Once in a while: how much is missing, and a step towards making up for it. */
  const look = (): void => {
    sinceLook = 0
    if (focusPower < 1e-10) return
    const missing = Math.sqrt(plainPower / focusPower)
    const wanted = Math.min(amplitudeOf(MAX_MAKE_UP_DB), Math.max(1, missing))
    makeUp.set(Math.min(makeUp.value * up, Math.max(makeUp.value * down, wanted)))
  }

  return {
    get isIdle() {
      return isIdle()
    },
    set(focus) {
      if (focus.isOn && isIdle()) clear()
      const wanted = Number.isFinite(focus.topHz) ? focus.topHz : plainAids.lowFocus.topHz
      const top = Math.min(lowFocusLimits.maxHz, Math.max(lowFocusLimits.minHz, wanted))
      if (isIdle()) {
        topHz.jump(top)
        lowPass.tune(top)
      } else topHz.set(top)
      mix.set(focus.isOn ? 1 : 0)
    },
    settle() {
      clear()
      topHz.jump(topHz.target)
      lowPass.tune(topHz.value)
      mix.jump(mix.target)
    },
    process(channels, from, to) {
      const count = Math.min(channels.length, channelCount)
      for (let i = from; i < to; i += 1) {
        if (!topHz.isSettled) lowPass.tune(topHz.next())
        const share = mix.next()
        const gain = makeUp.next()
        plainPower *= forget
        focusPower *= forget
        for (let c = 0; c < count; c += 1) {
          const samples = channels[c] as Float32Array
          const plain = samples[i] as number
          const focused = lowPass.run(c, highPass.run(c, plain))
          plainPower += plain * plain
          focusPower += focused * focused
          samples[i] = plain + share * (focused * gain - plain)
        }
        sinceLook += 1
        if (sinceLook === LOOK_FRAMES) look()
      }
    }
  }
}
