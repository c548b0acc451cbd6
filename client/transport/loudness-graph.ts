// What stands between the media element and the loudspeaker: loudness gain, volume, a fade for jumps, a limiter.
// Every change is a ramp: speed, source and seek never make the level jump.

/** Time constants of the ramps. A jump fades quicker than a volume change, or a loop would lose its first note. */
const volumeRampSec = 0.03
export const fadeSec = 0.004

/** Limiter: everything above -2 dBFS pressed 20:1. */
const limiterThresholdDb = -2
const limiterRatio = 20
/** The Web Audio compressor adds make-up gain of its own: (1 / gain at 0 dBFS) ^ 0.6 (Web Audio API 1.1, section 1.19.4). */
const makeUpDb = 0.6 * (-limiterThresholdDb + limiterThresholdDb / limiterRatio)

/** Loudness gain beyond this lifts mostly noise. */
const maxGainDb = 18

export interface LoudnessGraph {
  /** False while the browser holds sound back. */
  isRunning(): boolean
  resume(): Promise<void>
  /** Seconds between the element's position and the ear. */
  latencySec(): number
  setGainDb(gainDb: number): void
  setVolume(volume: number): void
  /** Fades to silence before a jump, and back after it. */
  duck(): void
  unduck(): void
  dispose(): void
}

export const dbToGain = (db: number): number => 10 ** (Math.min(db, maxGainDb) / 20)

/** A loudspeaker knob that feels even to the ear: half way sounds about half as loud. */
export const volumeToGain = (volume: number): number => volume ** 2

/** Null when the browser has no Web Audio or refuses the element: then the element's own volume has to do. */
export const createLoudnessGraph = (
  element: HTMLMediaElement,
  makeContext: () => AudioContext | null
): LoudnessGraph | null => {
  try {
    const context = makeContext()
    if (!context) return null
    const source = context.createMediaElementSource(element)
    const loudness = context.createGain()
    const volume = context.createGain()
    const fade = context.createGain()
    const limiter = context.createDynamicsCompressor()
    const trim = context.createGain()
    limiter.threshold.value = limiterThresholdDb
    limiter.knee.value = 0
    limiter.ratio.value = limiterRatio
    limiter.attack.value = 0.002
    limiter.release.value = 0.12
    trim.gain.value = 10 ** (-makeUpDb / 20)
    source.connect(loudness).connect(volume).connect(fade).connect(limiter).connect(trim).connect(context.destination)
    const ramp = (param: AudioParam, value: number, constant: number) => {
      param.cancelScheduledValues(context.currentTime)
      param.setTargetAtTime(value, context.currentTime, constant)
    }
    return {
      isRunning: () => context.state === 'running',
      resume: () => context.resume(),
      latencySec: () => finite(context.baseLatency) + finite(context.outputLatency),
      setGainDb: (db) => ramp(loudness.gain, dbToGain(db), volumeRampSec),
      setVolume: (value) => ramp(volume.gain, volumeToGain(value), volumeRampSec),
      duck: () => ramp(fade.gain, 0, fadeSec),
      unduck: () => ramp(fade.gain, 1, fadeSec),
      dispose: () => {
        source.disconnect()
        void context.close()
      }
    }
  } catch {
    return null
  }
}

const finite = (value: number | undefined): number => (value !== undefined && Number.isFinite(value) ? value : 0)
