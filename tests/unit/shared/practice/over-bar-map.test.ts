import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { overBarMap, type OverPlace } from '@shared/practice/over-bar-map'
import { createBarMap, type BarMap } from '@shared/timing/bar-map'
import { createFormMap } from '@shared/timing/passes'
import type { BarMapBody } from '@shared/timing/types'
import { validateBarMap } from '@shared/timing/validate-bar-map'
import { anyBarMapBody, meter } from '../timing/random-bar-map'

const ids = () => {
  let count = 0
  return () => `new-${(count += 1)}`
}
const placed = (body: BarMapBody, over: OverPlace): { body: BarMapBody; map: BarMap } => {
  const made = overBarMap(body, over, ids())
  const map = made && createBarMap(made)
  if (!made || !map) throw new Error('no bar map was made')
  return { body: made, map }
}
const anyOver: fc.Arbitrary<OverPlace> = fc.record({
  placeSec: fc.double({ min: -2, max: 120, noNaN: true }),
  rate: fc.double({ min: 0.2, max: 1.5, noNaN: true }),
  durationSec: fc.double({ min: 2, max: 200, noNaN: true })
})

describe('overBarMap', () => {
  it('gives every second of the new take the place it was played over', () => {
    fc.assert(
      fc.property(anyBarMapBody(), anyOver, fc.double({ min: 0, max: 1, noNaN: true }), (source, over, share) => {
        const old = createBarMap(source) as BarMap
        const { body, map } = placed(source, over)
        expect(validateBarMap(body).ok).toBe(true)
        const sec = share * over.durationSec
        const then = over.placeSec + sec * over.rate
        // Compared in seconds, so that a beat's fraction counts as what it is.
        expect(Math.abs(old.secAt(map.positionAt(sec)) - then)).toBeLessThan(1e-6)
        expect(map.tempoAt(sec)).toBeCloseTo(old.tempoAt(then) * over.rate, 4)
      }),
      { numRuns: 150 }
    )
  })

  it('keeps the meters and the bars of the form that lie within', () => {
    fc.assert(
      fc.property(anyBarMapBody(), anyOver, (source, over) => {
        const old = createBarMap(source) as BarMap
        const { body, map } = placed(source, over)
        const form = (marks: BarMapBody['marks']) => createFormMap({ marks, formLength: 12, cyclic: true })
        const endSec = over.placeSec + over.durationSec * over.rate
        const bars = old.barsIn({ startSec: over.placeSec, endSec }).slice(0, 50)
        for (const bar of bars) {
          expect(map.meterAt(bar)).toEqual(old.meterAt(bar))
          const [before, after] = [form(source.marks).formPlaceOf(bar), form(body.marks).formPlaceOf(bar)]
          expect(after?.formBar ?? null).toBe(before?.formBar ?? null)
        }
        const last = bars.at(-1) ?? 0
        if (bars.length < 50) expect(body.marks.every(({ bar }) => bar <= last + 1)).toBe(true)
        expect(body.marks.every(({ bar }) => bar >= (bars[0] ?? 0))).toBe(true)
      }),
      { numRuns: 100 }
    )
  })

  it('stretches the anchors of bars played at 70 percent', () => {
    const source: BarMapBody = {
      anchors: [0, 1, 2, 3, 4].map((bar) => ({
        id: `a${bar}`,
        sec: 10 + bar * 2,
        position: { bar: bar + 1, beat: { n: 1, d: 1 } }
      })),
      meters: [{ bar: 1, meter: meter('4/4') }],
      marks: [{ bar: 1, formBar: 1, newPass: true }]
    }
    const { body } = placed(source, { placeSec: 11.93, rate: 0.7, durationSec: 4.3 / 0.7 })
    const firstBars = body.anchors.filter(({ position }) => position.beat.n === 1)
    expect(firstBars.map(({ sec, position }) => [position.bar, Number(sec.toFixed(6))])).toEqual([
      [2, 0.1],
      [3, 2.957143],
      [4, 5.814286]
    ])
    expect(body.marks).toEqual([{ bar: 1, formBar: 1, newPass: true }])
  })

  it('makes none of none, and none of nonsense', () => {
    const empty: BarMapBody = { anchors: [], meters: [], marks: [] }
    expect(overBarMap(empty, { placeSec: 0, rate: 1, durationSec: 10 }, ids())).toBeNull()
    fc.assert(
      fc.property(anyBarMapBody(), fc.double(), fc.double(), fc.double(), (source, placeSec, rate, durationSec) => {
        const made = overBarMap(source, { placeSec, rate, durationSec }, ids())
        expect(made === null || validateBarMap(made).ok).toBe(true)
      }),
      { numRuns: 50 }
    )
  })
})
