import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createBarMap, type BarMap } from '@shared/timing/bar-map'
import { barMapDocument } from '@shared/timing/bar-map-document'
import {
  dragBarLine,
  fillAhead,
  layTaps,
  nudgeBarLine,
  setBarOneAt,
  setPickUp,
  shiftByPulses,
  type Gesture
} from '@shared/timing/bar-map-gestures'
import { rational } from '@shared/timing/rational'
import type { BarMapBody } from '@shared/timing/types'
import { anyBarMapBody, meter } from './random-bar-map'

/** Bar lines every two seconds from 0, in 4/4. */
const lines = (bars = 5, text = '4/4'): BarMapBody => ({
  anchors: Array.from({ length: bars }, (_, i) => ({
    id: `a${i}`,
    sec: i * 2,
    position: { bar: i + 1, beat: rational(1) }
  })),
  meters: [{ bar: 1, meter: meter(text) }],
  marks: []
})
const ids = () => {
  let count = 0
  return () => `new-${(count += 1)}`
}
const done = (body: BarMapBody, gesture: Gesture): BarMapBody => {
  const result = gesture.ok ? barMapDocument.apply(body, gesture.value) : gesture
  if (!result.ok) throw new Error(result.error.message)
  return result.value
}
const mapAfter = (body: BarMapBody, gesture: Gesture) => createBarMap(done(body, gesture)) as BarMap
const refusal = (gesture: Gesture) => (gesture.ok ? 'accepted' : gesture.error.message)

describe('dragging a bar line', () => {
  it('moves the anchor that is there or fixes the line', () => {
    expect(dragBarLine(lines(), 3, 4.2, ids())).toEqual({ ok: true, value: { kind: 'moveAnchor', id: 'a2', sec: 4.2 } })
    const sparse = { ...lines(), anchors: lines().anchors.filter(({ id }) => id === 'a0' || id === 'a4') }
    expect(dragBarLine(sparse, 3, 4.2, ids())).toMatchObject({
      value: { kind: 'setAnchor', anchor: { id: 'new-1', sec: 4.2 } }
    })
    expect(mapAfter(sparse, dragBarLine(sparse, 3, 4.2, ids())).barSec(2)).toBeCloseTo(2.1, 9)
  })

  it('refuses to pass its neighbours and says which', () => {
    expect(refusal(dragBarLine(lines(), 3, 1.9, ids()))).toBe(
      'Bar 3 cannot come before bar 2, which is fixed at 0:02.0.'
    )
    expect(refusal(dragBarLine(lines(), 3, 6, ids()))).toBe('Bar 3 cannot come after bar 4, which is fixed at 0:06.0.')
  })

  it('puts the line exactly there, and leaves all anchors of other places', () => {
    fc.assert(
      fc.property(anyBarMapBody(), fc.nat(), fc.double({ min: 0.05, max: 0.95, noNaN: true }), (body, pick, part) => {
        const map = createBarMap(body) as BarMap
        const i = pick % (body.anchors.length - 1)
        const [from, to] = [body.anchors[i]?.sec ?? 0, body.anchors[i + 1]?.sec ?? 0]
        const bar = map.barAt(from) + 1
        const lineSec = map.barSec(bar)
        fc.pre(lineSec > from + 0.01 && lineSec < to - 0.01)
        const sec = from + (to - from) * part
        const gesture = dragBarLine(body, bar, sec, ids())
        // A tempo beyond all bounds may still be refused.
        if (!gesture.ok) return
        expect(mapAfter(body, gesture).barSec(bar)).toBe(sec)
        const after = done(body, gesture).anchors
        for (const anchor of body.anchors) expect(after).toContainEqual(anchor)
      })
    )
  })

  it('nudges by seconds', () => {
    expect(mapAfter(lines(), nudgeBarLine(lines(), 2, -0.01, ids())).barSec(2)).toBeCloseTo(1.99, 9)
    expect(refusal(nudgeBarLine({ ...lines(), anchors: [] }, 2, 0.01, ids()))).toMatch(/two places/i)
  })
})

describe('counting by hand', () => {
  it('makes the nearest beat bar 1', () => {
    expect(mapAfter(lines(), setBarOneAt(lines(), 4.6)).positionAt(4.5)).toEqual({ bar: 1, beat: rational(1) })
  })

  it('sets bar 1 after a pick-up of felt beats', () => {
    const map = mapAfter(lines(), setPickUp(lines(), 0.02, 1))
    expect(map.positionAt(0)).toEqual({ bar: 0, beat: rational(4) })
    expect(map.barSec(1)).toBeCloseTo(0.5, 9)
    const compound = lines(5, '6/8')
    expect(mapAfter(compound, setPickUp(compound, 0, 1)).positionAt(0)).toEqual({ bar: 0, beat: rational(4) })
  })

  it('shifts by felt beats', () => {
    expect(shiftByPulses(lines(), -1)).toMatchObject({ value: { beats: { n: -1, d: 1 } } })
    expect(shiftByPulses(lines(5, '6/8'), 1)).toMatchObject({ value: { beats: { n: 3, d: 1 } } })
  })
})

describe('filling ahead', () => {
  it('lays bar lines at the tempo of the four bars before', () => {
    const after = done(lines(), fillAhead(lines(), 8.5, 20, ids()))
    expect(after.anchors.map(({ sec }) => sec)).toEqual([0, 2, 4, 6, 8, 10, 12, 14, 16, 18, 20])
    expect(after.anchors.at(-1)?.position.bar).toBe(11)
    expect(after.anchors.find(({ sec }) => sec === 8)?.id).toBe('a4')
  })

  it('takes the place of what was fixed there', () => {
    const body = lines(8)
    body.anchors[6] = { id: 'late', sec: 12.9, position: { bar: 7, beat: rational(1) } }
    const after = done(body, fillAhead(body, 10.1, 16, ids()))
    expect(after.anchors.map(({ sec }) => sec)).toEqual([0, 2, 4, 6, 8, 10, 12, 14, 16])
  })

  it('says when there is nothing to fill or what follows does not fit', () => {
    expect(refusal(fillAhead(lines(), 8.5, 9, ids()))).toBe('There is no bar line between 0:08.5 and 0:09.0.')
    const later = lines()
    later.anchors.push({ id: 'x', sec: 21, position: { bar: 7, beat: rational(1) } })
    expect(refusal(fillAhead(later, 8.5, 20, ids()))).toMatch(/cannot be bar 7/)
  })
})

describe('laying taps', () => {
  const tapped = [10, 12.2, 14.4].map((sec, i) => ({ id: `t${i}`, sec, position: { bar: 6 + i, beat: rational(1) } }))

  it('puts them in place of what was fixed between them, or from them on', () => {
    const body = lines(12)
    expect(refusal(layTaps(body, tapped))).toBe('accepted')
    const onward = done(body, layTaps(body, tapped, 40))
    expect(onward.anchors.at(-1)?.id).toBe('t2')
    expect(createBarMap(onward)?.barSec(9)).toBeCloseTo(16.6, 9)
    expect(refusal(layTaps(body, []))).toMatch(/nothing was tapped/i)
  })
})
