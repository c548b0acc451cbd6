import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createLimiter } from '@shared/audio/aids/limiter.ts'
import { createTruePeak, truePeakDelay } from '@shared/audio/aids/true-peak.ts'
import { decibels, differing, inPieces, largest, noise, rms, roughness, sampleRate, sine } from './signals.ts'

const ceiling = 10 ** (-1.5 / 20)

const limit = (channels: Float32Array[], sizes: readonly number[] = [128]) => {
  const limiter = createLimiter(sampleRate, { channels: channels.length })
  const out = channels.map((samples) => samples.slice())
  inPieces(out[0]?.length ?? 0, sizes, (from, to) => limiter.process(out, from, to))
  return { out, delay: limiter.delayFrames }
}

const truePeakOf = (samples: Float32Array): number => {
  const follow = createTruePeak()
  return samples.reduce((most, sample) => Math.max(most, follow.push(sample)), 0)
}

describe('the true peak', () => {
  // ITU-R BS.1770-5, annex 2, attachment 1: a sine at a quarter of the rate with its samples 45 degrees off the crest shows
  // 3 dB too little; EBU Tech 3341, tests 15-19, allow +0.2/-0.4 dB.
  it.each([
    [1 / 4, Math.PI / 4],
    [1 / 6, Math.PI / 3],
    [1 / 8, Math.PI / 8],
    [1 / 4, 0]
  ])('of a sine at %f of the rate is read between its samples', (part, phase) => {
    const tone = Float32Array.from({ length: 2000 }, (_, i) => 0.5 * Math.sin(2 * Math.PI * part * i + phase))
    const follow = createTruePeak()
    const read = tone.map((sample) => follow.push(sample)).slice(100)
    const off = decibels(largest(read) / 0.5)
    expect(off).toBeLessThan(0.2)
    expect(off).toBeGreaterThan(-0.4)
  })

  it('belongs to the sample that lies its delay back', () => {
    const follow = createTruePeak()
    const read = Array.from({ length: 40 }, (_, i) => follow.push(i === 10 ? 1 : 0))
    expect(read.indexOf(Math.max(...read))).toBe(10 + truePeakDelay)
  })
})

describe('the limiter', () => {
  it('passes what stays under its ceiling bit for bit, later by its delay', () => {
    const sound = [sine(97, 0.2, 0.8), noise(9600, 1, 0.3)]
    const { out, delay } = limit(sound)
    expect(delay).toBe(Math.round(0.0015 * sampleRate) - 1 + truePeakDelay)
    out.forEach((samples, c) => {
      expect(differing(samples.slice(delay), sound[c]?.slice(0, -delay))).toBe(0)
      expect(largest(samples.slice(0, delay))).toBe(0)
    })
  })

  it('lets no sample over its ceiling, whatever comes, however it is split', () => {
    fc.assert(
      fc.property(
        fc.integer(),
        fc.double({ min: 0.5, max: 8, noNaN: true }),
        fc.array(fc.integer({ min: 1, max: 900 }), { minLength: 1, maxLength: 4 }),
        (seed, level, sizes) => {
          const sound = [noise(4000, seed, level), noise(4000, seed + 1, 0.1)]
          const { out } = limit(sound, sizes)
          for (const samples of out) expect(largest(samples)).toBeLessThanOrEqual(ceiling * (1 + 1e-6))
          const whole = limit(sound, [4000]).out
          expect(out.map((samples, c) => differing(samples, whole[c]))).toEqual([0, 0])
        }
      ),
      { numRuns: 12 }
    )
  })

  it('keeps the true peak of tones within a tenth of a decibel of the ceiling', () => {
    for (const hz of [41, 110, 997, 6000, 12_000]) {
      const { out } = limit([sine(hz, 0.3, 1.6)])
      expect(decibels(truePeakOf(out[0] as Float32Array) / ceiling)).toBeLessThan(0.1)
    }
  })

  it('turns both sides down alike', () => {
    const [loud, soft] = [sine(110, 0.3, 1.5), sine(330, 0.3, 0.1)]
    const { out, delay } = limit([loud, soft])
    for (let i = 3000; i < 10_000; i += 1) {
      if (Math.abs(loud[i] as number) < 0.1 || Math.abs(soft[i] as number) < 0.01) continue
      const gains = [loud, soft].map(
        (samples, c) => ((out[c] as Float32Array)[i + delay] as number) / (samples[i] as number)
      )
      expect(gains[0]).toBeCloseTo(gains[1] as number, 4)
    }
  })

  it('does not bend the wave of a low string that is too loud', () => {
    const { out } = limit([sine(41.2, 1.5, 1.2)])
    const steady = (out[0] as Float32Array).slice(sampleRate)
    // Least-squares fit of the tone; what is left over is distortion.
    const [cos, sin] = [Math.cos, Math.sin].map((wave) =>
      Float32Array.from(steady, (_, i) => wave((2 * Math.PI * 41.2 * i) / sampleRate))
    ) as [Float32Array, Float32Array]
    const along = (wave: Float32Array) =>
      steady.reduce((sum, sample, i) => sum + sample * (wave[i] as number), 0) / wave.reduce((sum, w) => sum + w * w, 0)
    const [a, b] = [along(cos), along(sin)]
    const rest = steady.map((sample, i) => sample - a * (cos[i] as number) - b * (sin[i] as number))
    expect(decibels(rms(rest) / rms(steady))).toBeLessThan(-40)
  })

  it('gives way before a peak without a corner and comes back to bit-exact', () => {
    const quiet = sine(50, 2, 0.5)
    const sound = quiet.map((sample, i) => (i > 9600 && i < 14_400 ? sample * 3 : sample))
    const { out, delay } = limit([sound])
    expect(differing(out[0]?.slice(90_000 + delay), quiet.slice(90_000, -delay))).toBe(0)
    // From after the tone's own start on; a corner of the gain at full level would bend by hundredths.
    const tone = limit([sine(50, 0.5, 2)]).out[0] as Float32Array
    expect(roughness(tone.slice(delay + 2))).toBeLessThan(0.003)
  })

  it('makes silence of what is no number, and forgets it', () => {
    const sound = sine(100, 0.2)
    sound[100] = Number.NaN
    sound[200] = Infinity
    const { out, delay } = limit([sound])
    expect([out[0]?.[100 + delay], out[0]?.[200 + delay]]).toEqual([0, 0])
    expect(differing(out[0]?.slice(201 + delay), sound.slice(201, -delay))).toBe(0)
  })

  it('starts afresh after a reset', () => {
    const limiter = createLimiter(sampleRate, { channels: 1 })
    limiter.process([noise(5000, 3, 4)], 0, 5000)
    limiter.reset()
    const sound = sine(100, 0.1)
    const out = sound.slice()
    limiter.process([out], 0, out.length)
    expect(differing(out.slice(limiter.delayFrames), sound.slice(0, -limiter.delayFrames))).toBe(0)
  })
})
