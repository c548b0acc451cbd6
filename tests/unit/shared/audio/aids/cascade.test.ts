import { describe, expect, it } from 'vitest'
import { butterworthQualities, createCascade } from '@shared/audio/aids/cascade.ts'
import { decibels, rms, roughness, sampleRate, sine } from './signals.ts'

/** What a steady tone is changed by, in dB, measured over whole periods after the filter has settled. */
const measured = (kind: 'low-pass' | 'high-pass', order: number, cutoffHz: number, hz: number, rate = sampleRate) => {
  const filter = createCascade(kind, order, rate, 1, cutoffHz)
  const tone = sine(hz, 1, 0.5, rate)
  const out = tone.map((sample) => filter.run(0, sample))
  return decibels(rms(out.slice(rate / 2)) / rms(tone.slice(rate / 2)))
}

// |H|^2 = 1 / (1 + (f / fc)^2n), S. Butterworth, "On the theory of filter amplifiers" (1930); with the bilinear transform
// frequencies are warped by tan(pi f / rate).
const butterworthDb = (kind: 'low-pass' | 'high-pass', order: number, fc: number, f: number, rate = sampleRate) => {
  const ratio = Math.tan((Math.PI * f) / rate) / Math.tan((Math.PI * fc) / rate)
  return -10 * Math.log10(1 + (kind === 'low-pass' ? ratio : 1 / ratio) ** (2 * order))
}

describe('a Butterworth filter', () => {
  it('has the section qualities of the handbook tables', () => {
    // Order 4 and 8 as printed in filter tables (e.g. Texas Instruments SLOA049, "Active low-pass filter design", table 1).
    const rounded = (order: number) => butterworthQualities(order).map((quality) => Math.round(quality * 100) / 100)
    expect(rounded(2)).toEqual([0.71])
    expect(rounded(4)).toEqual([0.54, 1.31])
    expect(rounded(8)).toEqual([0.51, 0.6, 0.9, 2.56])
  })

  it.each([
    [8, 300, [40, 150, 250, 300, 350, 450]],
    [8, 80, [40, 70, 80, 100]],
    [8, 1000, [300, 900, 1000, 1300, 2000]]
  ] as const)('of order %i lets through below %i Hz what the formula says', (order, cutoff, tones) => {
    for (const hz of tones) {
      expect(
        Math.abs(measured('low-pass', order, cutoff, hz) - butterworthDb('low-pass', order, cutoff, hz))
      ).toBeLessThan(0.02)
    }
  })

  it('is 3 dB down at the cutoff and falls by 48 dB an octave', () => {
    expect(measured('low-pass', 8, 300, 300)).toBeCloseTo(-3.01, 1)
    expect(measured('low-pass', 8, 300, 600)).toBeCloseTo(-48.3, 0)
  })

  it('takes rumble away gently', () => {
    for (const [hz, rate] of [
      [10, 48_000],
      [28, 44_100],
      [41, 48_000],
      [100, 44_100]
    ] as const) {
      expect(measured('high-pass', 2, 28, hz, rate)).toBeCloseTo(butterworthDb('high-pass', 2, 28, hz, rate), 1)
    }
  })

  it('stays smooth and bounded while its cutoff is swept at every frame', () => {
    const filter = createCascade('low-pass', 8, sampleRate, 1, 1000)
    const tone = sine(60, 0.5)
    const swept = tone.map((sample, i) => {
      filter.tune(540 + 460 * Math.sin(i / 200))
      return filter.run(0, sample)
    })
    // A 60 Hz tone bends by level * (2 pi f / rate)^2 a frame at most; a jump in it would bend hundreds of times as much.
    expect(roughness(swept)).toBeLessThan(40 * 0.5 * ((2 * Math.PI * 60) / sampleRate) ** 2)
    expect(Math.max(...swept)).toBeLessThan(0.7)
  })

  it('keeps its channels apart', () => {
    const [both, alone] = [
      createCascade('low-pass', 8, sampleRate, 2, 200),
      createCascade('low-pass', 8, sampleRate, 1, 200)
    ]
    const tone = sine(100, 0.05)
    tone.forEach((sample, i) => {
      const left = both.run(0, sample)
      both.run(1, i % 2)
      expect(left).toBe(alone.run(0, sample))
    })
  })
})
