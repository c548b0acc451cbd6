// For a device whose rate is not the take's: one stream read at another rate, without seams.
import { kernelReach, readAt } from '../stretch/resampler.ts'

type Render = (out: readonly Float32Array[], frames: number) => void

const blockFrames = 128

/**
 * Gives `render`'s stream, `ratio` frames of it for each frame asked for (its rate divided by the wanted one). Nothing comes
 * later by it: the stream is asked for some frames ahead.
 */
export const createRateMatch = (render: Render, channels: number, ratio: number) => {
  const reach = kernelReach(ratio)
  const length = 4 * (Math.ceil(blockFrames * ratio) + blockFrames + 2 * reach)
  const stream = Array.from({ length: channels }, () => new Float32Array(length))
  const block = stream.map(() => new Float32Array(blockFrames))
  const nothing = new Float32Array(length)
  /** Frames of silence before the stream let its first ones be read like any other. */
  let filled = reach
  let at = reach
  const isShort = (): boolean => at + reach + 1 >= filled
  const fetch = (): void => {
    if (filled + blockFrames > length) {
      const whole = Math.floor(at) - reach
      for (const samples of stream) samples.copyWithin(0, whole, filled)
      filled -= whole
      at -= whole
    }
    render(block, blockFrames)
    stream.forEach((samples, channel) => samples.set(block[channel] ?? [], filled))
    filled += blockFrames
  }
  return (out: readonly Float32Array[], frames: number): void => {
    for (let n = 0; n < frames; n += 1) {
      while (isShort()) fetch()
      for (let channel = 0; channel < channels; channel += 1) {
        const samples = out[channel]
        if (samples) samples[n] = readAt(stream[channel] ?? nothing, at, ratio)
      }
      at += ratio
    }
  }
}
