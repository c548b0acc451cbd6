import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createBarGrid } from '@shared/timing/bar-grid'
import { rational } from '@shared/timing/rational'
import { fitTaps, learnTapLag, tapModes, undoTap, type TapFit, type TapInput } from '@shared/timing/taps'
import { validateBarMap } from '@shared/timing/validate-bar-map'
import { meter } from './random-bar-map'
import { simulateTaps, type Tapped, type Tapper } from './simulated-tapper'

const inFour = [{ bar: 1, meter: meter('4/4') }]
const grid = createBarGrid(inFour)

const fit = (input: Partial<TapInput> & Pick<TapInput, 'taps'>): TapFit => {
  let count = 0
  const newId = () => `t${(count += 1)}`
  const result = fitTaps({ mode: 'every beat', meters: inFour, rate: 1, lagSec: 0, newId, ...input })
  if (!result.ok) throw new Error(result.error.message)
  return result.value
}
const places = ({ anchors }: TapFit) => anchors.map(({ position: { bar, beat } }) => `${bar}.${beat.n}`)

/** Errors of the anchors in milliseconds of the take; an anchor on a wrong beat is off by a whole beat. */
const errorsMs = ({ anchors }: TapFit, { truth }: Tapped) =>
  anchors.map(({ sec, position }) => 1000 * Math.abs(sec - (truth[grid.pulsesAt(position).whole] ?? NaN)))
const rms = (values: number[]) => Math.sqrt(values.reduce((sum, value) => sum + value * value, 0) / values.length)

const SEEDS = Array.from({ length: 40 }, (_, i) => i + 1)
const crowd = (tapper: Partial<Tapper>, input: Partial<TapInput> = {}) =>
  SEEDS.map((seed) => {
    const tapped = simulateTaps({ ...tapper, seed })
    return { tapped, fitted: fit({ taps: tapped.taps, lagSec: 0.08, ...input }) }
  })
const crowdErrors = (people: ReturnType<typeof crowd>) =>
  people.flatMap(({ fitted, tapped }) => errorsMs(fitted, tapped))

// Forty tappers of 96 beats each: 20 ms of jitter, 80 ms late, every 25th beat missed, every 33rd doubled, 3 % of drift.
describe('tapping along', () => {
  it('takes most of the jitter out and keeps the drift: 20 ms of jitter leave under 9 ms at 120 beats a minute', () => {
    const errors = crowdErrors(crowd({ periodSec: 0.5 }))
    expect(rms(errors)).toBeLessThan(9)
    expect(Math.max(...errors)).toBeLessThan(50)
    // Without evening out the jitter is what it was.
    expect(rms(crowdErrors(crowd({ periodSec: 0.5 }, { smoothing: 0 })))).toBeGreaterThan(18)
  })

  it('does so from 60 to 180 beats a minute and counts every beat of the forty right', () => {
    for (const periodSec of [1, 0.75, 60 / 180]) {
      const errors = crowdErrors(crowd({ periodSec }))
      expect(rms(errors)).toBeLessThan(12)
      expect(Math.max(...errors)).toBeLessThan(60)
    }
  })

  it('finds doubled taps and takes few others for slips', () => {
    const people = crowd({ periodSec: 0.5 })
    let [found, bounces, wronged, sound] = [0, 0, 0, 0]
    for (const { tapped, fitted } of people) {
      tapped.meant.forEach((meant, i) => {
        const out = fitted.outliers.includes(i)
        if (meant === null) [bounces, found] = [bounces + 1, found + (out ? 1 : 0)]
        else [sound, wronged] = [sound + 1, wronged + (out ? 1 : 0)]
      })
    }
    expect(bounces).toBeGreaterThan(50)
    expect(found / bounces).toBeGreaterThan(0.95)
    expect(wronged / sound).toBeLessThan(0.01)
  })

  it('is twice as exact at half speed, where lag and jitter pass at the wall', () => {
    const errors = crowdErrors(crowd({ periodSec: 0.5, rate: 0.5 }, { rate: 0.5 }))
    expect(rms(errors)).toBeLessThan(6)
    // A lag taken off without regard to the speed would leave 40 ms.
    expect(rms(crowdErrors(crowd({ periodSec: 0.5, rate: 0.5 })))).toBeGreaterThan(30)
  })

  it('tells the spread of the hand', () => {
    for (const { fitted } of crowd({ periodSec: 0.5 })) {
      expect(fitted.residualSec).toBeGreaterThan(0.012)
      expect(fitted.residualSec).toBeLessThan(0.03)
    }
  })

  it('keeps taps where they fell without smoothing', () => {
    expect(fit({ taps: [1, 1.5, 2.1, 2.5], smoothing: 0 }).anchors.map(({ sec }) => sec)).toEqual([1, 1.5, 2.1, 2.5])
  })

  it('leaves a steady hand where it is', () => {
    const taps = Array.from({ length: 40 }, (_, i) => 1 + i * 0.4)
    fit({ taps }).anchors.forEach(({ sec }, i) => expect(sec).toBeCloseTo(taps[i] ?? 0, 6))
  })

  it('counts on over beats that were left out', () => {
    const taps = [1, 1.5, 2, 2.5, 4, 4.5, 5, 5.5]
    expect(places(fit({ taps }))).toEqual(['1.1', '1.2', '1.3', '1.4', '2.3', '2.4', '3.1', '3.2'])
    // A first gap half as long again is a slower start, not a wrong first tap.
    expect(places(fit({ taps: [0, 0.7, 1.2, 1.7] }))).toEqual(['1.1', '1.2', '1.3', '1.4'])
    const stray = [1, 1.5, 1.73, 2, 2.5, 3, 3.5]
    expect(fit({ taps: stray }).outliers).toEqual([2])
  })

  it('gives anchors that make a sound bar map, whatever was tapped', () => {
    const gaps = fc.array(fc.double({ min: 0.03, max: 3, noNaN: true }), { minLength: 1, maxLength: 40 })
    fc.assert(
      fc.property(gaps, fc.constantFrom(0, 0.5, 1), (list, smoothing) => {
        let sec = 0
        const taps = [0, ...list.map((gap) => (sec += gap))]
        const { anchors, outliers } = fit({ taps, smoothing })
        expect(validateBarMap({ anchors, meters: inFour, marks: [] })).toMatchObject({ ok: true })
        expect(outliers.every((i) => i >= 0 && i < taps.length)).toBe(true)
      }),
      { numRuns: 150 }
    )
  })
})

describe('ways to tap', () => {
  const taps = [1, 2, 3, 4]

  it('places taps on the beats they stand for', () => {
    expect(places(fit({ taps, mode: 'every beat' }))).toEqual(['1.1', '1.2', '1.3', '1.4'])
    expect(places(fit({ taps, mode: '1 and 3' }))).toEqual(['1.1', '1.3', '2.1', '2.3'])
    expect(places(fit({ taps, mode: '2 and 4' }))).toEqual(['1.2', '1.4', '2.2', '2.4'])
    expect(places(fit({ taps, mode: 'bar lines' }))).toEqual(['1.1', '2.1', '3.1', '4.1'])
    expect(places(fit({ taps, startPosition: { bar: 0, beat: rational(4) } }))).toEqual(['0.4', '1.1', '1.2', '1.3'])
  })

  it('taps felt beats in compound time and bar lines through meter changes', () => {
    expect(places(fit({ taps, meters: [{ bar: 1, meter: meter('6/8') }] }))).toEqual(['1.1', '1.4', '2.1', '2.4'])
    const meters = [...inFour, { bar: 2, meter: meter('3/4') }]
    expect(places(fit({ taps: [0, 2, 3.5, 5], mode: 'bar lines', meters }))).toEqual(['1.1', '2.1', '3.1', '4.1'])
  })

  it('offers 1 and 3 or 2 and 4 only with four beats in the bar', () => {
    expect(tapModes(inFour)).toHaveLength(4)
    expect(tapModes([{ bar: 1, meter: meter('12/8') }])).toHaveLength(4)
    expect(tapModes([{ bar: 1, meter: meter('3/4') }])).toEqual(['every beat', 'bar lines'])
    const waltz = { mode: '1 and 3', meters: [{ bar: 1, meter: meter('3/4') }], taps, rate: 1, lagSec: 0 } as const
    expect(fitTaps({ ...waltz, newId: () => 'id' })).toMatchObject({ ok: false })
  })

  it('refuses too few taps and taps that cannot be', () => {
    const bad: Partial<TapInput>[] = [{ taps: [1] }, { taps: [2, 1] }, { taps: [1, NaN] }, { rate: 0 }, { lagSec: NaN }]
    for (const input of bad) {
      const whole: TapInput = {
        taps,
        mode: 'every beat',
        meters: inFour,
        rate: 1,
        lagSec: 0,
        newId: () => 'id',
        ...input
      }
      expect(fitTaps(whole).ok).toBe(false)
    }
  })

  it('takes the last tap back', () => {
    expect(undoTap(taps)).toEqual([1, 2, 3])
    expect(undoTap([])).toEqual([])
  })
})

describe("a person's tap lag", () => {
  it('is found from some 32 taps, within 15 ms for everybody and 8 ms on the whole, at full and at half speed', () => {
    for (const rate of [1, 0.5]) {
      const lags = SEEDS.map((seed) => {
        const { truth, taps } = simulateTaps({ seed, rate, beats: 34, lagSec: 0.11 })
        const lag = learnTapLag(taps, [0, ...truth, 100], rate)
        expect(lag?.spreadSec).toBeGreaterThan(0.008)
        expect(lag?.spreadSec).toBeLessThan(0.045)
        return 1000 * Math.abs((lag?.lagSec ?? NaN) - 0.11)
      })
      expect(Math.max(...lags)).toBeLessThan(15)
      expect(rms(lags)).toBeLessThan(8)
    }
  })

  it('may be early', () => {
    const { truth, taps } = simulateTaps({ lagSec: -0.04, jitterSec: 0, missed: 0, doubled: 0 })
    expect(learnTapLag(taps, [0, ...truth, 100], 1)?.lagSec).toBeCloseTo(-0.04, 9)
  })

  it('is not told from fewer than eight taps, nor without beats or speed', () => {
    const { truth, taps } = simulateTaps({ missed: 0, doubled: 0 })
    expect(learnTapLag(taps.slice(0, 7), [0, ...truth], 1)).toBeNull()
    expect(learnTapLag(taps.slice(0, 8), [0, ...truth], 1)).not.toBeNull()
    expect(learnTapLag(taps, [], 1)).toBeNull()
    expect(learnTapLag(taps, truth, 0)).toBeNull()
  })
})
