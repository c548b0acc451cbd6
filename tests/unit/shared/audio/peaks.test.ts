import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createPeakFolder, encodePeaks } from '@shared/audio/peak-folder.ts'
import {
  bucketRange,
  decodeBuckets,
  decodePeakHeader,
  encodePeakHeader,
  levelForZoom,
  peakFileBytes,
  peakHeaderBytes,
  peakLayout,
  peakLevels,
  toPeak
} from '@shared/audio/peaks.ts'

const recordings = fc
  .record({ channels: fc.constantFrom(1, 2), frames: fc.integer({ min: 1, max: 9000 }), seed: fc.integer() })
  .map(({ channels, frames, seed }) => {
    // A small generator of its own (Lehmer, modulus 2^31 - 1), so that a failing case can be repeated from its seed.
    let state = (Math.abs(seed) % 2147483646) + 1
    const next = () => (state = (state * 48271) % 2147483647) / 2147483647
    return { channels, samples: Float32Array.from({ length: frames * channels }, () => next() * 2.2 - 1.1) }
  })

const naive = (samples: Float32Array, channels: number, channel: number, from: number, to: number) => {
  let [low, high] = [Infinity, -Infinity]
  for (let at = from; at < to && at * channels < samples.length; at++) {
    const value = toPeak(samples[at * channels + channel] ?? 0)
    low = Math.min(low, value)
    high = Math.max(high, value)
  }
  return [low / 32768, high / 32768]
}

const headerOf = (file: Uint8Array) => {
  const header = decodePeakHeader(file)
  if (!header.ok) throw new Error(header.error)
  return header.value
}

describe('a peak file', () => {
  it('holds the true extremes of every bucket of every level', () => {
    fc.assert(
      fc.property(recordings, ({ channels, samples }) => {
        const file = encodePeaks(samples, 48_000, channels)
        const header = headerOf(file)
        for (const level of header.levels) {
          const { start, end } = bucketRange(header, level)
          decodeBuckets(file.subarray(start, end), channels).forEach((values, channel) => {
            for (let bucket = 0; bucket < level.buckets; bucket++) {
              const from = bucket * level.samplesPerBucket
              const expected = naive(samples, channels, channel, from, from + level.samplesPerBucket)
              expect([values[bucket * 2], values[bucket * 2 + 1]]).toEqual(expected)
            }
          })
        }
      }),
      { numRuns: 40 }
    )
  })

  it('comes out the same however the samples arrive', () => {
    fc.assert(
      fc.property(recordings, fc.array(fc.integer({ min: 1, max: 3000 }), { minLength: 1 }), (recording, cuts) => {
        const { channels, samples } = recording
        const collect = (push: (folder: ReturnType<typeof createPeakFolder>) => void) => {
          const buckets: string[] = []
          const folder = createPeakFolder(channels, (level, bucket) => buckets.push(`${level}:${bucket.join()}`))
          push(folder)
          folder.finish()
          return { buckets, frames: folder.frames(), loudest: folder.loudest() }
        }
        const whole = collect((folder) => folder.push(samples))
        const cut = collect((folder) => {
          for (let at = 0, turn = 0; at < samples.length; turn++) {
            const end = at + (cuts[turn % cuts.length] ?? 1) * channels
            folder.push(samples.subarray(at, end))
            at = end
          }
        })
        expect(cut).toEqual(whole)
      }),
      { numRuns: 40 }
    )
  })

  it('keeps samples of 16-bit recordings exactly', () => {
    fc.assert(
      fc.property(fc.integer({ min: -32768, max: 32767 }), (sample) => {
        expect(toPeak(sample / 32768)).toBe(sample)
      })
    )
  })

  it('holds samples beyond full scale within it and counts not-a-number as silence', () => {
    const file = encodePeaks(Float32Array.of(3, -3, Number.NaN), 44_100, 1)
    expect([...(decodeBuckets(file.subarray(peakHeaderBytes, peakHeaderBytes + 4), 1)[0] ?? [])]).toEqual([
      -1,
      32767 / 32768
    ])
    const hollow = encodePeaks(Float32Array.of(Number.NaN), 44_100, 1)
    expect([...(decodeBuckets(hollow.subarray(peakHeaderBytes, peakHeaderBytes + 4), 1)[0] ?? [])]).toEqual([0, 0])
  })
})

describe('a peak header', () => {
  it('reads back as it was written', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(8000, 44_100, 48_000, 192_000),
        fc.constantFrom(1, 2),
        fc.integer({ min: 0, max: 192_000 * 6 * 3600 }),
        (sampleRate, channels, frames) => {
          const header = peakLayout(sampleRate, channels, frames)
          expect(decodePeakHeader(encodePeakHeader(header))).toEqual({ ok: true, value: header })
        }
      )
    )
  })

  it('is refused when it is something else', () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 400 }), (bytes) => {
        expect(decodePeakHeader(bytes)).toEqual({ ok: false, error: 'not-peaks' })
      })
    )
  })

  it('is refused when one of its numbers is impossible', () => {
    const sound = encodePeakHeader(peakLayout(48_000, 2, 100_000))
    for (const at of [0, 4, 6, 12, 24, 28]) {
      const broken = Uint8Array.from(sound)
      broken[at] = 0xee
      expect(decodePeakHeader(broken).ok, `byte ${at}`).toBe(false)
    }
  })

  it('lays levels one after the other up to the end of the file', () => {
    const header = peakLayout(44_100, 2, 1_000_000)
    header.levels.forEach((level, index) => {
      expect(bucketRange(header, level).end).toBe(header.levels[index + 1]?.offset ?? peakFileBytes(header))
    })
  })
})

describe('levelForZoom', () => {
  it('takes the coarsest level that is fine enough', () => {
    const header = peakLayout(44_100, 1, 10_000_000)
    const zooms = [1, 255, 256, 1023, 1024, 70_000]
    expect(zooms.map((zoom) => levelForZoom(header, zoom)?.samplesPerBucket)).toEqual([
      256, 256, 256, 256, 1024, 65_536
    ])
  })
})

describe('bucketRange', () => {
  it('stays within the level whatever is asked', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true }), fc.double({ noNaN: true }), (from, to) => {
        const header = peakLayout(44_100, 2, 500_000)
        for (const level of header.levels) {
          const whole = bucketRange(header, level)
          const part = bucketRange(header, level, from, to)
          expect(part.start).toBeGreaterThanOrEqual(whole.start)
          expect(part.end).toBeGreaterThanOrEqual(part.start)
          expect(part.end).toBeLessThanOrEqual(whole.end)
        }
      })
    )
    expect(peakLevels.length).toBeGreaterThan(1)
  })
})
