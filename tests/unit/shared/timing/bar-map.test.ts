import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createBarMap, type BarMap } from '@shared/timing/bar-map'
import { compare, rational } from '@shared/timing/rational'
import type { BarMapBody, Position } from '@shared/timing/types'
import { anyBarMapBody, meter } from './random-bar-map'

const NANOSECOND = 1e-9

const at = (bar: number, n = 1, d = 1): Position => ({ bar, beat: rational(n, d) })
const mapOf = (body: BarMapBody): BarMap => {
  const map = createBarMap(body)
  if (!map) throw new Error('not a sound body')
  return map
}
const steady = (bpm: number, text = '4/4', startSec = 0): BarMapBody => ({
  anchors: [
    { id: 'a', sec: startSec, position: at(1) },
    { id: 'b', sec: startSec + (meter(text).upper * 60) / bpm, position: at(2) }
  ],
  meters: [{ bar: 1, meter: meter(text) }],
  marks: []
})
const isBefore = (a: Position, b: Position) => a.bar < b.bar || (a.bar === b.bar && compare(a.beat, b.beat) < 0)

const anySec = fc.double({ min: -10, max: 3600, noNaN: true })

describe('bar map', () => {
  it('comes back to the same second within a nanosecond', () => {
    fc.assert(
      fc.property(anyBarMapBody(), fc.array(anySec, { minLength: 5, maxLength: 5 }), (body, secs) => {
        const map = mapOf(body)
        for (const sec of secs) expect(Math.abs(map.secAt(map.positionAt(sec)) - sec)).toBeLessThanOrEqual(NANOSECOND)
      }),
      { numRuns: 500 }
    )
  })

  it('gives later seconds later places, down to a nanosecond', () => {
    fc.assert(
      fc.property(anyBarMapBody(), anySec, fc.double({ min: 1.0001e-9, max: 10, noNaN: true }), (body, sec, later) => {
        const map = mapOf(body)
        const next = sec + later
        // Near an hour a double steps by half a picosecond; the sum may fall just short of the asked distance.
        fc.pre(next - sec >= NANOSECOND)
        expect(isBefore(map.positionAt(sec), map.positionAt(next))).toBe(true)
        expect(map.beatsAt(sec)).toBeLessThan(map.beatsAt(next))
      }),
      { numRuns: 500 }
    )
  })

  it('stays in order around anchors and bar lines, where places are rounded to plain fractions', () => {
    fc.assert(
      fc.property(anyBarMapBody(), fc.nat(), fc.integer({ min: -8, max: 8 }), (body, pick, steps) => {
        const map = mapOf(body)
        const anchor = body.anchors[pick % body.anchors.length]?.sec ?? 0
        for (const knot of [anchor, map.barSec(map.barAt(anchor))]) {
          const here = knot + steps * NANOSECOND
          expect(isBefore(map.positionAt(here), map.positionAt(here + 1.001 * NANOSECOND))).toBe(true)
        }
      }),
      { numRuns: 300 }
    )
  })

  it('comes back to the same place for every subdivision that is played', () => {
    fc.assert(
      fc.property(
        anyBarMapBody(),
        fc.integer({ min: -8, max: 400 }),
        fc.constantFrom(1, 2, 3, 4, 5, 6, 7, 8, 12, 16),
        fc.nat(),
        (body, bar, d, pick) => {
          const map = mapOf(body)
          const place = at(bar, d + (pick % (map.meterAt(bar).upper * d)), d)
          expect(map.positionAt(map.secAt(place))).toEqual(place)
        }
      ),
      { numRuns: 500 }
    )
  })

  it('gives places that are integers inside their bar', () => {
    fc.assert(
      fc.property(anyBarMapBody(), anySec, (body, sec) => {
        const map = mapOf(body)
        const { bar, beat } = map.positionAt(sec)
        expect([bar, beat.n, beat.d].every(Number.isSafeInteger)).toBe(true)
        expect(beat.n >= beat.d && beat.n < (map.meterAt(bar).upper + 1) * beat.d).toBe(true)
      })
    )
  })

  it('meets every anchor exactly', () => {
    fc.assert(
      fc.property(anyBarMapBody(), (body) => {
        const map = mapOf(body)
        for (const { sec, position } of body.anchors) {
          expect(map.positionAt(sec)).toEqual(position)
          expect(map.secAt(position)).toBe(sec)
        }
      })
    )
  })

  it('counts beats continuously and back', () => {
    fc.assert(
      fc.property(anyBarMapBody(), anySec, (body, sec) => {
        const map = mapOf(body)
        expect(Math.abs(map.secAtBeats(map.beatsAt(sec)) - sec)).toBeLessThanOrEqual(NANOSECOND)
      })
    )
    expect(mapOf(steady(120)).beatsAt(2)).toBe(4)
    expect(mapOf(steady(120)).beatsAt(0)).toBe(0)
  })

  it('runs straight between anchors and goes on at the tempo of its ends', () => {
    const map = mapOf({
      anchors: [
        { id: 'a', sec: 10, position: at(1) },
        { id: 'b', sec: 12, position: at(2) },
        { id: 'c', sec: 16, position: at(3) }
      ],
      meters: [{ bar: 1, meter: meter('4/4') }],
      marks: []
    })
    expect(map.positionAt(11.25)).toEqual(at(1, 7, 2))
    expect(map.positionAt(9.5)).toEqual(at(0, 4))
    expect(map.positionAt(5.5)).toEqual(at(-2, 4))
    expect(map.positionAt(20)).toEqual(at(4))
    expect([map.tempoAt(0), map.tempoAt(11), map.tempoAt(12), map.tempoAt(100)]).toEqual([120, 120, 60, 60])
    expect(map.barSpan(0)).toEqual({ startSec: 8, endSec: 10 })
    expect(map.barsSpan(2, 1)).toEqual({ startSec: 10, endSec: 16 })
  })

  it('measures the tempo in felt beats', () => {
    // 6/8 with a bar of two seconds: two felt beats, 60 a minute.
    const map = mapOf({
      ...steady(120, '6/8'),
      anchors: [
        { id: 'a', sec: 0, position: at(1) },
        { id: 'b', sec: 2, position: at(2) }
      ]
    })
    expect(map.tempoAt(1)).toBeCloseTo(60, 9)
    expect(map.beatsOf(3)).toEqual([
      { sec: 4, position: at(3, 1) },
      { sec: 5, position: at(3, 4) }
    ])
  })

  it('keeps the quarter note across a meter change between two anchors', () => {
    const map = mapOf({
      anchors: [
        { id: 'a', sec: 0, position: at(1) },
        { id: 'b', sec: 7, position: at(4) }
      ],
      meters: [
        { bar: 1, meter: meter('4/4') },
        { bar: 2, meter: meter('6/8') },
        { bar: 3, meter: meter('7/8') }
      ],
      marks: []
    })
    // 8 + 6 + 7 eighths in 7 seconds: a third of a second each.
    expect(map.barSec(2)).toBeCloseTo(8 / 3, 9)
    expect(map.barSec(3)).toBeCloseTo(14 / 3, 9)
    expect(map.beatsAt(map.barSec(3))).toBeCloseTo(4 + 6, 9)
  })

  it('names the bars that share sound with a span', () => {
    const map = mapOf(steady(120))
    expect(map.barsIn({ startSec: 2, endSec: 6 })).toEqual([2, 3])
    expect(map.barsIn({ startSec: 1.9, endSec: 6.1 })).toEqual([1, 2, 3, 4])
    expect(map.barsIn({ startSec: 2, endSec: 2 })).toEqual([2])
    expect(map.barsIn({ startSec: 5, endSec: 1 })).toEqual([3])
    expect(mapOf(steady(120, '4/4', 0.5)).barRange(10)).toEqual({ firstBar: 0, lastBar: 5 })
    fc.assert(
      fc.property(anyBarMapBody(), anySec, fc.double({ min: 0, max: 60, noNaN: true }), (body, startSec, length) => {
        const any = mapOf(body)
        const bars = any.barsIn({ startSec, endSec: startSec + length })
        expect(bars[0]).toBe(any.barAt(startSec))
        const last = bars.at(-1) ?? 0
        expect(any.barSec(last)).toBeLessThanOrEqual(startSec + length + NANOSECOND)
        expect(any.barSec(last + 1)).toBeGreaterThanOrEqual(startSec + length - NANOSECOND)
      })
    )
  })

  it('is none with fewer than two anchors or with anchors out of order', () => {
    const body = steady(120)
    expect(createBarMap({ ...body, anchors: body.anchors.slice(1) })).toBeNull()
    expect(createBarMap({ ...body, anchors: body.anchors.toReversed() })).toBeNull()
  })

  it('answers any number without NaN', () => {
    const map = mapOf(steady(120))
    for (const sec of [Number.NaN, Infinity, -Infinity]) {
      expect(map.positionAt(sec)).toEqual(at(1))
      expect([map.beatsAt(sec), map.tempoAt(sec), map.secAtBeats(sec)].every(Number.isFinite)).toBe(true)
    }
    expect(map.secAt({ bar: Number.NaN, beat: { n: 1, d: 0 } })).toBe(0)
  })

  it('takes a meterless body as 4/4', () => {
    expect(mapOf({ ...steady(120), meters: [] }).positionAt(2)).toEqual(at(2))
  })
})
