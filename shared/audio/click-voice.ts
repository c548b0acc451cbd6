// Our own click: short tuned blips like a struck wooden bar, well above the bass so that they never hide a note.

/** 2 the bar's first, 1 a beat, 0 a subdivision. */
export type ClickAccent = 0 | 1 | 2

export interface ClickVoice {
  /** Longest a strike sounds, in frames. */
  readonly lengthFrames: number
  /** A click from this output frame on (rounded to a whole one). Strikes may overlap and come in any order. */
  strike(atFrame: number, accent: ClickAccent): void
  /** Drops the strikes at this frame and later (all without one); those that sound already ring out. */
  clear(fromFrame?: number): void
  /**
   * Adds what sounds in the frames `fromFrame` to `fromFrame + frames` to every channel of `out`, from index `offset` on,
   * times `gain` (kept within 0 to 1). Strikes that ended before `fromFrame` are forgotten. Allocates nothing.
   */
  mixInto(out: readonly Float32Array[], fromFrame: number, frames: number, gain?: number, offset?: number): void
}

const LENGTH_SEC = 0.03
const ATTACK_SEC = 0.0008
const FADE_SEC = 0.006
/** Modes of a free bar: 1 : 2.756 : 5.404 (Fletcher and Rossing, "The Physics of Musical Instruments", ch. 2), high ones dying sooner. */
const MODES = [
  { ratio: 1, level: 1, decaySec: 0.007 },
  { ratio: 2.756, level: 0.4, decaySec: 0.003 },
  { ratio: 5.404, level: 0.15, decaySec: 0.0012 }
]
/** By accent. `peak` is the largest sample: a quarter of full scale is moderate beside music. */
const BLIPS = [
  { hz: 880, peak: 0.11 },
  { hz: 1175, peak: 0.2 },
  { hz: 1568, peak: 0.28 }
]
/** Strikes on their way at one time; more than a second of the fastest subdivision. */
const CAPACITY = 256

/** The three clicks at a sample rate. Sample-exact: the same samples however the frames are split. */
export const createClickVoice = (sampleRate: number): ClickVoice => {
  const sounds = BLIPS.map(({ hz, peak }) => blip(sampleRate, hz, peak))
  const lengthFrames = (sounds[0] as Float32Array).length
  const starts = new Float64Array(CAPACITY)
  const accents = new Uint8Array(CAPACITY)
  let count = 0

  const keep = (index: number, to: number): void => {
    starts[to] = starts[index] as number
    accents[to] = accents[index] as number
  }

  return {
    lengthFrames,
    strike(atFrame, accent) {
      if (count === CAPACITY || !Number.isFinite(atFrame)) return
      starts[count] = Math.round(atFrame)
      accents[count] = accent
      count += 1
    },
    clear(fromFrame = -Infinity) {
      let kept = 0
      for (let k = 0; k < count; k += 1) if ((starts[k] as number) < fromFrame) keep(k, kept++)
      count = kept
    },
    mixInto(out, fromFrame, frames, gain = 1, offset = 0) {
      const level = Math.min(1, Math.max(0, gain))
      let kept = 0
      for (let k = 0; k < count; k += 1) {
        const start = starts[k] as number
        if (start + lengthFrames <= fromFrame) continue
        const sound = sounds[accents[k] as number] as Float32Array
        const first = Math.max(0, start - fromFrame)
        const end = Math.min(frames, start + lengthFrames - fromFrame)
        for (let c = 0; c < out.length; c += 1) {
          const samples = out[c] as Float32Array
          for (let i = first; i < end; i += 1) {
            samples[offset + i] = (samples[offset + i] as number) + level * (sound[fromFrame + i - start] as number)
          }
        }
        keep(k, kept++)
      }
      count = kept
    }
  }
}

const blip = (sampleRate: number, hz: number, peak: number): Float32Array => {
  const sound = Float32Array.from({ length: Math.round(LENGTH_SEC * sampleRate) }, (_, i) => {
    const sec = i / sampleRate
    const wave = MODES.reduce(
      (sum, { ratio, level, decaySec }) =>
        sum + level * Math.exp(-sec / decaySec) * Math.sin(2 * Math.PI * hz * ratio * sec),
      0
    )
    return wave * Math.min(1, sec / ATTACK_SEC) * Math.min(1, (LENGTH_SEC - sec) / FADE_SEC)
  })
  const loudest = sound.reduce((most, sample) => Math.max(most, Math.abs(sample)), 0)
  return sound.map((sample) => (sample / loudest) * peak)
}
