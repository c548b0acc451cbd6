// Folds samples into peak levels as they come, so that hours of sound need no more memory than a few buckets.
import { bucketBytes, encodePeakHeader, peakFileBytes, peakLayout, peakLevels, toPeak } from './peaks.ts'

/** Takes one finished bucket of a level: minimum and maximum of each channel, as 16-bit numbers. */
export type BucketSink = (level: number, bucket: Int16Array) => void

type Fold = { filled: number; extremes: Int16Array }

const freshFold = (channels: number): Fold => ({ filled: 0, extremes: new Int16Array(channels * 2) })

const resetFold = (fold: Fold): void => {
  fold.filled = 0
  for (let at = 0; at < fold.extremes.length; at += 2) {
    fold.extremes[at] = 32767
    fold.extremes[at + 1] = -32768
  }
}

/**
 * A running fold over interleaved samples. `push` takes whole frames; `finish` hands out the last, shorter buckets.
 * The bucket given to the sink is used again afterwards: copy it. Exact: each bucket holds the true extremes.
 */
export const createPeakFolder = (channels: number, sink: BucketSink) => {
  const folds = peakLevels.map(() => freshFold(channels))
  folds.forEach(resetFold)
  let frames = 0
  let loudest = 0

  const close = (level: number): void => {
    const fold = folds[level]
    if (fold === undefined || fold.filled === 0) return
    sink(level, fold.extremes)
    const above = folds[level + 1]
    if (above !== undefined) {
      for (let at = 0; at < fold.extremes.length; at += 2) {
        above.extremes[at] = Math.min(above.extremes[at] ?? 0, fold.extremes[at] ?? 0)
        above.extremes[at + 1] = Math.max(above.extremes[at + 1] ?? 0, fold.extremes[at + 1] ?? 0)
      }
      above.filled += fold.filled
      if (above.filled === peakLevels[level + 1]) close(level + 1)
    }
    resetFold(fold)
  }

  /** Folds `count` frames from `start`, all within one bucket of the finest level. */
  const foldRun = (fold: Fold, samples: Float32Array, start: number, count: number): void => {
    for (let channel = 0; channel < channels; channel++) {
      let low = Infinity
      let high = -Infinity
      const end = (start + count) * channels
      for (let at = start * channels + channel; at < end; at += channels) {
        const sample = samples[at] ?? 0
        if (sample < low) low = sample
        if (sample > high) high = sample
      }
      // Not-a-number samples leave the run empty; they count as silence.
      if (low > high) low = high = 0
      loudest = Math.max(loudest, -low, high)
      fold.extremes[channel * 2] = Math.min(fold.extremes[channel * 2] ?? 0, toPeak(low))
      fold.extremes[channel * 2 + 1] = Math.max(fold.extremes[channel * 2 + 1] ?? 0, toPeak(high))
    }
    fold.filled += count
  }

  return {
    push(samples: Float32Array): void {
      const finest = folds[0]
      if (finest === undefined) return
      const total = Math.floor(samples.length / channels)
      for (let done = 0; done < total;) {
        const run = Math.min(total - done, peakLevels[0] - finest.filled)
        foldRun(finest, samples, done, run)
        done += run
        if (finest.filled === peakLevels[0]) close(0)
      }
      frames += total
    },
    finish(): void {
      folds.forEach((_, level) => close(level))
    },
    frames: () => frames,
    /** Largest magnitude so far, 1 = full scale. */
    loudest: () => loudest
  }
}

/** A whole peak file from interleaved samples in memory: for short recordings and for the browser's first sound. */
export const encodePeaks = (samples: Float32Array, sampleRate: number, channels: number): Uint8Array => {
  const header = peakLayout(sampleRate, channels, Math.floor(samples.length / channels))
  const file = new Uint8Array(peakFileBytes(header))
  file.set(encodePeakHeader(header))
  const view = new DataView(file.buffer)
  const next = header.levels.map((level) => level.offset)
  const folder = createPeakFolder(channels, (level, bucket) => {
    const at = next[level] ?? 0
    bucket.forEach((value, index) => view.setInt16(at + index * 2, value, true))
    next[level] = at + bucketBytes(channels)
  })
  folder.push(samples)
  folder.finish()
  return file
}
