import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createBarMap, type BarMap } from '@shared/timing/bar-map'
import { rational } from '@shared/timing/rational'
import { nudgeSec, snapSec, snapSpan } from '@shared/timing/snap'
import { anyBarMapBody, meter } from './random-bar-map'

/** Bars of two seconds from 1 on, in 4/4; bar 0 from -1. */
const barMap = createBarMap({
  anchors: [1, 2].map((bar) => ({ id: `a${bar}`, sec: bar * 2 - 1, position: { bar, beat: rational(1) } })),
  meters: [{ bar: 1, meter: meter('4/4') }],
  marks: []
}) as BarMap
const take = { barMap, durationSec: 60 }

describe('snapping', () => {
  it('goes to the nearest bar line or beat, or nowhere', () => {
    expect([snapSec(3.9, 'bar', take), snapSec(4.1, 'bar', take)]).toEqual([3, 5])
    expect([snapSec(3.7, 'beat', take), snapSec(4.8, 'beat', take)]).toEqual([3.5, 5])
    expect(snapSec(3.7, 'none', take)).toBe(3.7)
    expect(snapSec(3.7, 'bar', { ...take, barMap: null })).toBe(3.7)
  })

  it('stays inside the take', () => {
    expect(snapSec(0.2, 'bar', take)).toBe(1)
    expect(snapSec(-3, 'bar', take)).toBe(0)
    expect(snapSec(60.4, 'bar', { ...take, durationSec: 60.5 })).toBe(60.5)
  })

  it('never lets a span vanish', () => {
    expect(snapSpan({ startSec: 3.2, endSec: 6.8 }, 'bar', take)).toEqual({ startSec: 3, endSec: 7 })
    expect(snapSpan({ startSec: 6.8, endSec: 3.2 }, 'bar', take)).toEqual({ startSec: 3, endSec: 7 })
    expect(snapSpan({ startSec: 3.4, endSec: 3.6 }, 'bar', take)).toEqual({ startSec: 3, endSec: 5 })
    expect(snapSpan({ startSec: 3.6, endSec: 3.7 }, 'beat', take)).toEqual({ startSec: 3.5, endSec: 4 })
    fc.assert(
      fc.property(
        anyBarMapBody(),
        fc.double({ min: 0, max: 600, noNaN: true }),
        fc.double({ min: 0, max: 30, noNaN: true }),
        fc.constantFrom<'bar' | 'beat'>('bar', 'beat'),
        (body, startSec, length, snap) => {
          const setting = { barMap: createBarMap(body), durationSec: 10_000 }
          const snapped = snapSpan({ startSec, endSec: startSec + length }, snap, setting)
          expect(snapped.endSec).toBeGreaterThan(snapped.startSec)
          expect(snapSpan(snapped, snap, setting)).toEqual(snapped)
        }
      )
    )
  })

  it('steps from line to line', () => {
    expect([nudgeSec(3, 'bar', 1, take), nudgeSec(3.2, 'bar', 1, take), nudgeSec(3.2, 'bar', -1, take)]).toEqual([
      5, 5, 3
    ])
    expect([nudgeSec(3, 'beat', 3, take), nudgeSec(3, 'beat', -2, take)]).toEqual([4.5, 2])
    expect(nudgeSec(3, 'none', -2, take)).toBeCloseTo(2.8, 9)
    expect(nudgeSec(3, 'bar', -9, take)).toBe(0)
    expect(nudgeSec(5.0000000001, 'bar', 1, take)).toBe(7)
  })
})
