// The waveform of a file that only this browser has.
import { createPeakFolder } from '@shared/audio/peak-folder'
import { peakLevels } from '@shared/audio/peaks'
import type { Sec } from '@shared/units'
import type { PeaksSource } from '@client/timeline/peaks-source'

/** Beyond these the drawing would cost more memory than a phone has: decoding makes 11 MB of a minute of stereo. */
export const drawLimits = { bytes: 100 * 1024 ** 2, sec: 25 * 60 }

/** Frames folded before other work gets a turn: some 5 ms of it. */
const framesAtOnce = 1 << 18
/** The outline needs no more than this, Hz; the decoder gives it back at this rate and so in a third of the memory. */
const outlineRate = 16_000

interface Decoded {
  sampleRate: number
  length: number
  numberOfChannels: number
  getChannelData(channel: number): Float32Array
}

export const canDraw = (bytes: number, durationSec: Sec): boolean =>
  bytes <= drawLimits.bytes && durationSec <= drawLimits.sec

/** Peaks at all zooms; both sides of stereo under one outline. `pause` gives others a turn. */
export const foldPeaks = async (decoded: Decoded, pause: () => Promise<void>): Promise<PeaksSource> => {
  const channels = Math.min(2, decoded.numberOfChannels)
  const sides = Array.from({ length: channels }, (_, channel) => decoded.getChannelData(channel))
  const found = peakLevels.map((samples) => new Int16Array(2 * Math.ceil(decoded.length / samples)))
  const filled = peakLevels.map(() => 0)
  const folder = createPeakFolder(channels, (level, bucket) => {
    const at = filled[level] ?? 0
    found[level]?.set([Math.min(bucket[0] ?? 0, bucket[2] ?? 0), Math.max(bucket[1] ?? 0, bucket[3] ?? 0)], at)
    filled[level] = at + 2
  })
  for (let start = 0; start < decoded.length; start += framesAtOnce) {
    const count = Math.min(framesAtOnce, decoded.length - start)
    const together = new Float32Array(count * channels)
    sides.forEach((side, channel) => {
      for (let frame = 0; frame < count; frame += 1) together[frame * channels + channel] = side[start + frame] ?? 0
    })
    folder.push(together)
    await pause()
  }
  folder.finish()
  return {
    levels: peakLevels.map((samples, level) => ({
      secPerPair: samples / decoded.sampleRate,
      pairs: found[level] ?? new Int16Array(0),
      fullScale: 32768
    }))
  }
}

const breath = (): Promise<void> => new Promise((resolve) => setTimeout(resolve, 0))

/** Null where the browser cannot decode it. */
export const peaksOfFile = async (file: File): Promise<PeaksSource | null> => {
  try {
    const context = new OfflineAudioContext(1, 1, outlineRate)
    return await foldPeaks(await context.decodeAudioData(await file.arrayBuffer()), breath)
  } catch {
    return null
  }
}
