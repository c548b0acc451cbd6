import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createClickVoice, type ClickAccent } from '@shared/audio/click-voice.ts'
import { inPieces, largest, rms, sampleRate } from './aids/signals.ts'

const alone = (accent: ClickAccent, rate = sampleRate): Float32Array => {
  const voice = createClickVoice(rate)
  const out = new Float32Array(voice.lengthFrames + 10)
  voice.strike(0, accent)
  voice.mixInto([out], 0, out.length)
  return out
}

const anyStrike = fc.record({
  frame: fc.integer({ min: -1000, max: 6000 }),
  accent: fc.constantFrom<ClickAccent>(0, 1, 2)
})

describe('a click', () => {
  it.each([44_100, 48_000, 96_000])('is short and moderate at a rate of %i', (rate) => {
    for (const accent of [0, 1, 2] as const) {
      const sound = alone(accent, rate)
      expect(createClickVoice(rate).lengthFrames).toBe(Math.round(rate * 0.03))
      expect(largest(sound)).toBeLessThan(0.3)
      expect(largest(sound)).toBeGreaterThan(0.1)
      // Nothing is cut off: the last frames have faded.
      expect(largest(sound.slice(-50))).toBeLessThan(0.001)
    }
  })

  it('is the stronger the more it counts', () => {
    const [subdivision, beat, first] = ([0, 1, 2] as const).map((accent) => rms(alone(accent)))
    expect(beat).toBeGreaterThan((subdivision as number) * 1.2)
    expect(first).toBeGreaterThan((beat as number) * 1.1)
  })

  it('has its attack within a thousandth of a second of its frame', () => {
    for (const accent of [0, 1, 2] as const) {
      const sound = alone(accent)
      const at = sound.findIndex((sample) => Math.abs(sample) > largest(sound) / 2)
      expect(at / sampleRate).toBeLessThan(0.001)
    }
  })

  it('sounds on its frame to the sample, strikes added up, however the frames are split', () => {
    fc.assert(
      fc.property(
        fc.array(anyStrike, { maxLength: 12 }),
        fc.array(fc.integer({ min: 1, max: 500 }), { minLength: 1, maxLength: 4 }),
        (strikes, sizes) => {
          const voice = createClickVoice(sampleRate)
          const expected = new Float64Array(6000)
          for (const { frame, accent } of strikes) {
            voice.strike(frame, accent)
            alone(accent).forEach((sample, i) => {
              if (frame + i >= 0 && frame + i < 6000)
                expected[frame + i] = (expected[frame + i] as number) + sample * 0.5
            })
          }
          const out = [new Float32Array(6000), new Float32Array(6000).fill(1)]
          inPieces(6000, sizes, (from, to) => voice.mixInto(out, from, to - from, 0.5, from))
          const off = (samples: Float32Array | undefined, base: number) =>
            largest((samples as Float32Array).map((sample, i) => sample - base - (expected[i] as number)))
          expect(off(out[0], 0)).toBeLessThan(1e-6)
          expect(off(out[1], 1)).toBeLessThan(1e-6)
        }
      ),
      { numRuns: 20 }
    )
  })

  it('is not louder than one at full gain', () => {
    const voice = createClickVoice(sampleRate)
    const out = new Float32Array(2000)
    voice.strike(0, 2)
    voice.mixInto([out], 0, 2000, 7)
    expect(largest(out)).toBe(largest(alone(2)))
  })

  it('rings out when the later ones are dropped', () => {
    const voice = createClickVoice(sampleRate)
    voice.strike(0, 2)
    voice.strike(2000, 1)
    voice.clear(1)
    const out = new Float32Array(4000)
    voice.mixInto([out], 0, 4000)
    expect(out.slice(0, 1450)).toEqual(alone(2))
    expect(largest(out.slice(1450))).toBe(0)
    voice.strike(5000, 1)
    voice.clear()
    voice.mixInto([out.fill(0)], 4000, 4000)
    expect(largest(out)).toBe(0)
  })
})
