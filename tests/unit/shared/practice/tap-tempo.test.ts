import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { compareTempo, tapTempo } from '@shared/practice/tap-tempo'
import { simulateTaps } from '../timing/simulated-tapper'

const steady = (bpm: number, count: number, startSec = 10) =>
  Array.from({ length: count }, (_, i) => startSec + (i * 60) / bpm)

describe('tapping a tempo', () => {
  it('finds a steady one exactly, with no spread', () => {
    for (const bpm of [40, 92, 200, 320]) {
      const tempo = tapTempo(steady(bpm, 8))
      expect(tempo?.bpm).toBeCloseTo(bpm, 6)
      expect(tempo?.spreadBpm).toBeCloseTo(0, 6)
      expect(tempo?.taps).toBe(8)
    }
  })

  it('takes three taps', () => {
    expect([tapTempo([]), tapTempo([1]), tapTempo([1, 1.5])]).toEqual([null, null, null])
    expect(tapTempo([1, 1.5, 2])?.bpm).toBeCloseTo(120, 6)
  })

  it('is not misled by a tap left out or a bounce', () => {
    fc.assert(
      fc.property(fc.integer({ min: 40, max: 240 }), fc.integer({ min: 1, max: 8 }), (bpm, index) => {
        const taps = steady(bpm, 10)
        const missed = taps.filter((_, i) => i !== index)
        expect(Math.abs((tapTempo(missed)?.bpm ?? 0) / bpm - 1)).toBeLessThan(0.005)
        const doubled = [...taps, (taps[index] as number) + (0.2 * 60) / bpm].sort((a, b) => a - b)
        expect(Math.abs((tapTempo(doubled)?.bpm ?? 0) / bpm - 1)).toBeLessThan(0.005)
      }),
      { numRuns: 60 }
    )
  })

  it('begins anew after a pause', () => {
    expect(tapTempo([...steady(60, 8), ...steady(150, 6, 30)])?.bpm).toBeCloseTo(150, 6)
    expect(tapTempo([...steady(60, 8), 30, 30.4])).toBeNull()
  })

  it('hears a human hand within two percent and says how much it wavers', () => {
    for (let seed = 1; seed <= 30; seed += 1) {
      const { taps } = simulateTaps({ seed, periodSec: 0.65, beats: 24, drift: 0, missed: 0.04, doubled: 0.03 })
      const tempo = tapTempo(taps)
      expect(Math.abs((tempo?.bpm ?? 0) / (60 / 0.65) - 1)).toBeLessThan(0.02)
      // 20 ms of jitter at both ends of a gap: 28 ms of 650, 4 beats a minute of 92; judged from two dozen gaps.
      expect(tempo?.spreadBpm).toBeGreaterThan(1)
      expect(tempo?.spreadBpm).toBeLessThan(9)
    }
  })

  it('never gives a number that is none', () => {
    fc.assert(
      fc.property(fc.array(fc.double({ min: 0, max: 30, noNaN: true }), { maxLength: 12 }), (any) => {
        const tempo = tapTempo([...any].sort((a, b) => a - b))
        if (tempo) expect(Number.isFinite(tempo.bpm) && tempo.bpm > 0 && tempo.spreadBpm >= 0).toBe(true)
      }),
      { numRuns: 200 }
    )
  })
})

describe('a tapped tempo beside the take’s', () => {
  it.each([
    [92, 88, 'you tap 92, the take plays 88 here: 5 % faster'],
    [85.4, 88, 'you tap 85, the take plays 88 here: 3 % slower'],
    [88.5, 88, 'you tap 89, the take plays 88 here: the same'],
    [88, 176, 'you tap 88, the take plays 176 here: half time'],
    [46, 88, 'you tap 46, the take plays 88 here: half time, 5 % faster'],
    [180, 92, 'you tap 180, the take plays 92 here: double time, 2 % slower'],
    [100, 290, 'you tap 100, the take plays 290 here'],
    [100, 0, 'you tap 100, the take plays 0 here']
  ])('%d against %d', (tapped, taken, words) => {
    expect(compareTempo(tapped, taken)).toBe(words)
  })
})
