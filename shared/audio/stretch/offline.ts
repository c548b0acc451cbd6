// A whole recording stretched at once: for the command line, clips and tests.
import { createStretcher } from '@shared/audio/stretch/stretcher'
import type { SampleSource } from '@shared/audio/stretch/types'

export interface StretchSettings {
  /** 1 is as recorded, 0.5 half as fast. */
  speed: number
  semitones: number
  cents?: number
}

/** Channels in memory as a source. All of one length. */
export const memorySource = (channels: readonly Float32Array[], sampleRate: number): SampleSource => {
  const frames = channels[0]?.length ?? 0
  return {
    channels: channels.length,
    sampleRate,
    frames,
    read: (from, into) => {
      for (let c = 0; c < channels.length; c++) {
        const target = into[c]!
        const data = channels[c]!
        const start = Math.max(0, -from)
        const count = Math.min(target.length, frames - from)
        if (start > 0) target.fill(0, 0, Math.min(start, target.length))
        if (count > start) target.set(data.subarray(from + start, from + count), start)
        if (count < target.length) target.fill(0, Math.max(0, count))
      }
      return true
    }
  }
}

export const pitchRatio = (semitones: number): number => (semitones === 0 ? 1 : 2 ** (semitones / 12))

/** Length of the result is the input's divided by the speed, to the nearest frame. */
export const stretchSamples = (
  channels: readonly Float32Array[],
  sampleRate: number,
  { speed, semitones, cents = 0 }: StretchSettings
): Float32Array[] => {
  const source = memorySource(channels, sampleRate)
  const stretcher = createStretcher(source)
  const frames = Math.round(source.frames / speed)
  const out = channels.map(() => new Float32Array(frames))
  stretcher.schedule({ outFrame: 0, sourceFrame: 0, speed, ratio: pitchRatio(semitones + cents / 100) })
  stretcher.render(out, 0, frames)
  return out
}
