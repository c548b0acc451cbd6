// The last thing before the ear: nothing leaves louder than the ceiling.
import { amplitudeOf } from './ramp.ts'
import { createTruePeak, truePeakDelay } from './true-peak.ts'

export interface LimiterOptions {
  /** Highest true peak let through, dB below full scale. */
  ceilingDb?: number
  /** How long before a peak the level starts to give way. */
  lookAheadMs?: number
  channels?: number
}

export interface Limiter {
  /** Frames by which everything comes out later. */
  readonly delayFrames: number
  /** In place, all channels by the same gain; allocates nothing. What is no number counts as silence. */
  process(channels: readonly Float32Array[], from: number, to: number): void
  /** Forgets what is under way (the delayed frames too). */
  reset(): void
}

/** Held over a period of a low string (24 ms for E1), so that its wave is not bent, then let go. */
const HOLD_SEC = 0.025
const RELEASE_SEC = 0.12
// So near to 1 the gain is 1: a step of a hundred-thousandth is 100 dB down.
const AS_GOOD_AS_ONE = 1 - 1e-5

/**
 * Look-ahead limiter: the gain each true peak needs (see true-peak.ts), its minimum held over look-ahead and hold, let go
 * exponentially, averaged over the look-ahead. The average of gains that are all low enough for a peak is low enough for it,
 * so no sample passes the ceiling, and the gain moves without a corner. Where no peak goes over, samples come out bit for
 * bit, `delayFrames` later. Running minimum by D. Lemire, "Streaming maximum-minimum filter" (2006): constant work a frame.
 */
export const createLimiter = (sampleRate: number, options: LimiterOptions = {}): Limiter => {
  const { ceilingDb = -1.5, lookAheadMs = 1.5, channels: channelCount = 2 } = options
  const ceiling = amplitudeOf(ceilingDb)
  const look = Math.max(1, Math.round((lookAheadMs / 1000) * sampleRate))
  const held = createRunningMinimum(look + Math.round(HOLD_SEC * sampleRate))
  const release = 1 - Math.exp(-1 / (RELEASE_SEC * sampleRate))
  const average = createAverage(look)
  const delayFrames = look - 1 + truePeakDelay
  const waiting = Array.from({ length: channelCount }, () => new Float32Array(delayFrames))
  const peaks = waiting.map(() => createTruePeak(ceiling))
  let at = 0
  let gain = 1

  const nextGain = (peak: number): number => {
    const needed = held.push(peak > ceiling ? ceiling / peak : 1)
    const freed = gain + (1 - gain) * release
    gain = Math.min(needed, freed > AS_GOOD_AS_ONE ? 1 : freed)
    return average.push(gain)
  }

  return {
    delayFrames,
    process(channels, from, to) {
      const count = Math.min(channels.length, channelCount)
      for (let i = from; i < to; i += 1) {
        let peak = 0
        for (let c = 0; c < count; c += 1) {
          const sample = finite((channels[c] as Float32Array)[i] as number)
          peak = Math.max(peak, (peaks[c] as TruePeak).push(sample))
        }
        const factor = nextGain(peak)
        for (let c = 0; c < count; c += 1) {
          const samples = channels[c] as Float32Array
          const line = waiting[c] as Float32Array
          const late = line[at] as number
          line[at] = finite(samples[i] as number)
          samples[i] = late * factor
        }
        at = at + 1 === delayFrames ? 0 : at + 1
      }
    },
    reset() {
      for (const line of waiting) line.fill(0)
      for (const peak of peaks) peak.clear()
      held.clear()
      average.clear()
      at = 0
      gain = 1
    }
  }
}

type TruePeak = ReturnType<typeof createTruePeak>

const finite = (sample: number): number => (Number.isFinite(sample) ? sample : 0)

/** Least of the last `length` values (1 before the first). */
const createRunningMinimum = (length: number) => {
  const values = new Float64Array(length + 1)
  const frames = new Float64Array(length + 1)
  let [head, size, frame] = [0, 0, 0]
  const wrap = (index: number): number => (index > length ? index - length - 1 : index)
  return {
    push(value: number): number {
      while (size > 0 && (values[wrap(head + size - 1)] as number) >= value) size -= 1
      const tail = wrap(head + size)
      values[tail] = value
      frames[tail] = frame
      size += 1
      if ((frames[head] as number) <= frame - length) {
        head = wrap(head + 1)
        size -= 1
      }
      frame += 1
      return values[head] as number
    },
    clear(): void {
      head = size = frame = 0
    }
  }
}

/** Mean of the last `length` values (1 before the first); exactly 1 when they all are. */
const createAverage = (length: number) => {
  const values = new Float64Array(length).fill(1)
  let [at, sum, below] = [0, length, 0]
  return {
    push(value: number): number {
      const old = values[at] as number
      values[at] = value
      at = at + 1 === length ? 0 : at + 1
      below += (value < 1 ? 1 : 0) - (old < 1 ? 1 : 0)
      // Counted, not summed, so that rounding left over from an earlier peak never colours what passes untouched.
      sum = below === 0 ? length : sum + value - old
      return below === 0 ? 1 : sum / length
    },
    clear(): void {
      values.fill(1)
      at = below = 0
      sum = length
    }
  }
}
