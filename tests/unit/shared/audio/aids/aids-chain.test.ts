import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createAidsChain } from '@shared/audio/aids/aids-chain.ts'
import { plainAids, type Aids, type Channel } from '@shared/audio/listening.ts'
import { decibels, differing, inPieces, noise, rms, roughness, sampleRate, sine } from './signals.ts'

const focusAt = (topHz: number): Aids => ({ ...plainAids, lowFocus: { isOn: true, topHz } })
const choose = (channel: Channel): Aids => ({ ...plainAids, channel })

/** Runs the sound through in blocks of 128 frames; `at` is asked before every block. */
const run = (
  channels: Float32Array[],
  aids: Aids,
  at?: (frame: number) => { aids: Aids; gainDb?: number } | undefined
) => {
  const chain = createAidsChain(sampleRate, channels.length)
  chain.set(aids)
  const out = channels.map((samples) => samples.slice())
  inPieces(out[0]?.length ?? 0, [128], (from, to) => {
    const change = at?.(from)
    if (change) chain.set(change.aids, change.gainDb)
    chain.process(out, from, to)
  })
  return { out, chain }
}

describe('the chain of listening aids', () => {
  it('passes everything bit for bit when nothing is chosen, and says so', () => {
    const sound = [noise(5000, 1), noise(5000, 2)]
    const { out, chain } = run(sound, { ...plainAids, cents: 30, isOctaveUp: true })
    expect(out).toEqual(sound)
    expect(chain.isNeutral).toBe(true)
  })

  it('is neutral again, bit for bit, some time after everything was switched off', () => {
    const sound = [noise(24_000, 3), noise(24_000, 4)]
    const everything: Aids = { ...focusAt(200), channel: 'sides' }
    const { out, chain } = run(sound, plainAids, (frame) => {
      if (frame === 1280) return { aids: everything, gainDb: -6 }
      return frame === 12_800 ? { aids: plainAids, gainDb: 0 } : undefined
    })
    expect(chain.isNeutral).toBe(true)
    for (const c of [0, 1]) {
      expect(differing(out[c]?.slice(20_000), sound[c]?.slice(20_000))).toBe(0)
      expect(differing(out[c]?.slice(8000, 9000), sound[c]?.slice(8000, 9000))).toBeGreaterThan(900)
    }
  })

  it('gives the same samples however the frames are split', () => {
    const change = fc.record({
      frame: fc.integer({ min: 0, max: 5000 }),
      topHz: fc.integer({ min: 50, max: 1200 }),
      isOn: fc.boolean(),
      channel: fc.constantFrom<Channel>('both', 'left', 'right', 'middle', 'sides'),
      gainDb: fc.integer({ min: -12, max: 6 })
    })
    fc.assert(
      fc.property(
        change,
        change,
        fc.array(fc.integer({ min: 1, max: 700 }), { minLength: 1, maxLength: 5 }),
        (a, b, sizes) => {
          const split = (pieces: readonly number[]) => {
            const sound = [noise(6000, 5), noise(6000, 6)]
            const chain = createAidsChain(sampleRate, 2)
            const ends = [Math.min(a.frame, b.frame), Math.max(a.frame, b.frame), 6000]
            let start = 0
            ;[undefined, a, b].forEach((next, k) => {
              if (next) chain.set({ ...plainAids, lowFocus: next, channel: next.channel }, next.gainDb)
              const end = ends[k] as number
              inPieces(end - start, pieces, (from, to) => chain.process(sound, start + from, start + to))
              start = end
            })
            return sound
          }
          const [pieces, whole] = [split(sizes), split([6000])]
          expect(pieces.map((samples, c) => differing(samples, whole[c]))).toEqual([0, 0])
        }
      ),
      { numRuns: 12 }
    )
  })
})

describe('the channel choice', () => {
  const [left, right] = [Float32Array.of(0.5, -0.25, 0.125), Float32Array.of(0.25, 0.5, -1)]
  it.each([
    ['left', [0.5, -0.25, 0.125], [0.5, -0.25, 0.125]],
    ['right', [0.25, 0.5, -1], [0.25, 0.5, -1]],
    ['middle', [0.375, 0.125, -0.4375], [0.375, 0.125, -0.4375]],
    ['sides', [0.125, -0.375, 0.5625], [0.125, -0.375, 0.5625]]
  ] as const)('lets %s be heard on both ears', (channel, expectedLeft, expectedRight) => {
    expect(run([left, right], choose(channel)).out.map((samples) => [...samples])).toEqual([
      expectedLeft,
      expectedRight
    ])
  })

  it('leaves mono as it is', () => {
    const sound = [noise(1000, 7)]
    const { out, chain } = run(sound, choose('sides'))
    expect(out).toEqual(sound)
    expect(chain.isNeutral).toBe(true)
  })

  it('moves from one choice to another without a corner', () => {
    const tone = sine(100, 0.2)
    const silence = new Float32Array(tone.length)
    const { out } = run([tone, silence], choose('left'), (frame) =>
      frame === 4736 ? { aids: choose('right') } : undefined
    )
    // Straight down over 15 ms from the tone to nothing: each end of the ramp bends by a frame's share of it at most.
    expect(roughness(out[0] as Float32Array)).toBeLessThan(2 * (0.5 / (0.015 * sampleRate)))
    expect(rms((out[0] as Float32Array).slice(4736 + 720))).toBe(0)
  })
})

describe('low focus', () => {
  const after = (samples: Float32Array | undefined, sec: number) => (samples as Float32Array).slice(sec * sampleRate)

  it('keeps the bass and takes the rest away', () => {
    const levelOf = (hz: number) => {
      const tone = sine(hz, 1)
      return decibels(rms(after(run([tone], focusAt(300)).out[0], 0.5)) / rms(tone))
    }
    expect(Math.abs(levelOf(100))).toBeLessThan(0.2)
    expect(Math.abs(levelOf(220))).toBeLessThan(0.3)
    expect(levelOf(41)).toBeGreaterThan(-1)
    // Up to 6 dB of what was lost are given back.
    expect(levelOf(600)).toBeLessThan(-40)
  })

  it('brings a bass under a band up to what was heard before, a bass alone not', () => {
    const [bass, band] = [sine(80, 6, 0.2), sine(900, 6, 0.2)]
    const mix = bass.map((sample, i) => sample + (band[i] as number))
    const raised = decibels(rms(after(run([mix], focusAt(300)).out[0], 5)) / rms(bass))
    expect(raised).toBeCloseTo(decibels(Math.SQRT2), 1)
    const quiet = bass.map((sample, i) => sample * 0.2 + (band[i] as number))
    const most = decibels(rms(after(run([quiet], focusAt(300)).out[0], 5)) / rms(bass) / 0.2)
    expect(Math.abs(most - 6)).toBeLessThan(0.1)
  })

  it('never jumps up when it is switched', () => {
    const [bass, band] = [sine(80, 4, 0.2), sine(900, 4, 0.2)]
    const mix = bass.map((sample, i) => sample + (band[i] as number))
    const { out } = run([mix], plainAids, (frame) => {
      if (frame === 48_000) return { aids: focusAt(300) }
      return frame === 144_000 ? { aids: plainAids } : undefined
    })
    // Windows of two periods of the bass: none is louder than the plain sound.
    const plain = rms(mix)
    inPieces(mix.length, [1200], (from, to) => {
      expect(decibels(rms((out[0] as Float32Array).slice(from, to)) / plain)).toBeLessThan(0.4)
    })
  })

  it('is switched and swept without a click', () => {
    const tone = sine(60, 1)
    const { out } = run([tone], plainAids, (frame) => {
      if (frame === 9600) return { aids: focusAt(90) }
      if (frame === 19_200) return { aids: focusAt(1000) }
      if (frame === 28_800) return { aids: focusAt(80) }
      return frame === 38_400 ? { aids: plainAids } : undefined
    })
    // A jump by a tenth of the level would bend by 0.05.
    expect(roughness(out[0] as Float32Array)).toBeLessThan(0.002)
  })

  it('keeps tops within what the desk offers and takes no nonsense', () => {
    const sound = noise(4800, 9)
    expect(run([sound], focusAt(5)).out).toEqual(run([sound], focusAt(80)).out)
    expect(run([sound], focusAt(9000)).out).toEqual(run([sound], focusAt(1000)).out)
    expect(run([sound], focusAt(Number.NaN)).out).toEqual(run([sound], focusAt(300)).out)
  })
})

describe('the loudness gain', () => {
  it('is there from the first frame when it is set before, and fades when it is set later', () => {
    const tone = sine(100, 0.5)
    const chain = createAidsChain(sampleRate, 1)
    chain.set(plainAids, -6.0206)
    const out = tone.slice()
    chain.process([out], 0, 12_000)
    expect(rms(out.slice(0, 4800)) / rms(tone.slice(0, 4800))).toBeCloseTo(0.5, 4)
    chain.set(plainAids, 0)
    chain.process([out], 12_000, 24_000)
    expect(roughness(out)).toBeLessThan(0.001)
    expect(out.slice(16_000)).toEqual(tone.slice(16_000))
  })

  it('stays when the aids are set without it', () => {
    const chain = createAidsChain(sampleRate, 1)
    chain.set(plainAids, 20 * Math.log10(0.25))
    chain.set(focusAt(300))
    chain.set(plainAids)
    const out = Float32Array.of(0.5, 0.5)
    chain.process([out], 0, 2)
    expect(out[1]).toBeCloseTo(0.125, 6)
  })
})
