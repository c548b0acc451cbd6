import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { canDraw, drawLimits, foldPeaks } from '@client/features/trial/trial-peaks'

const decoded = (sides: Float32Array[], sampleRate = 16_000) => ({
  sampleRate,
  length: sides[0]?.length ?? 0,
  numberOfChannels: sides.length,
  getChannelData: (channel: number) => sides[channel] ?? new Float32Array(0)
})
const noPause = () => Promise.resolve()
const sample = fc.float({ min: -1, max: 1, noNaN: true })

describe('foldPeaks', () => {
  it('holds the extremes of both sides in every bucket', async () => {
    await fc.assert(
      fc.asyncProperty(fc.array(fc.tuple(sample, sample), { minLength: 1, maxLength: 1500 }), async (frames) => {
        const sides = [0, 1].map((side) => new Float32Array(frames.map((frame) => frame[side as 0 | 1])))
        const { levels } = await foldPeaks(decoded(sides), noPause)
        const finest = levels[0]
        expect(finest?.pairs).toHaveLength(2 * Math.ceil(frames.length / 256))
        for (let bucket = 0; bucket * 256 < frames.length; bucket += 1) {
          const part = frames.slice(bucket * 256, bucket * 256 + 256).flat()
          // Peaks are kept in 16 bits: half a step off at most, one at full scale.
          expect(Math.abs((finest?.pairs[bucket * 2] ?? 9e9) / 32768 - Math.min(...part))).toBeLessThanOrEqual(
            1 / 32768
          )
          expect(Math.abs((finest?.pairs[bucket * 2 + 1] ?? 9e9) / 32768 - Math.max(...part))).toBeLessThanOrEqual(
            1 / 32768
          )
        }
      }),
      { numRuns: 30 }
    )
  })

  it('gives others a turn between stretches of a long recording', async () => {
    let turns = 0
    await foldPeaks(decoded([new Float32Array(1_000_000)]), () => {
      turns += 1
      return Promise.resolve()
    })
    expect(turns).toBe(4)
  })

  it('knows how long a pair lasts', async () => {
    const { levels } = await foldPeaks(decoded([new Float32Array(300)], 8000), noPause)
    expect(levels.map(({ secPerPair }) => secPerPair)).toEqual([256, 1024, 4096, 16384, 65536].map((n) => n / 8000))
  })
})

describe('canDraw', () => {
  it('draws what a phone has memory for', () => {
    expect(canDraw(drawLimits.bytes, drawLimits.sec)).toBe(true)
    expect(canDraw(drawLimits.bytes + 1, 10)).toBe(false)
    expect(canDraw(10, drawLimits.sec + 1)).toBe(false)
  })
})
