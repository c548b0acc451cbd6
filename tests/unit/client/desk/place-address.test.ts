import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  noAddress,
  readAddress,
  spanOfWhere,
  whereOfSpan,
  writeAddress,
  type PlaceAddress,
  type PlaceWhere
} from '@client/app/desk/place-address'
import { createBarMap, type BarMap } from '@shared/timing/bar-map'
import { createFormMap } from '@shared/timing/passes'
import { rational } from '@shared/timing/rational'
import { anyBarMapBody, meter } from '../../shared/timing/random-bar-map'

const read = (query: string) => readAddress(new URLSearchParams(query))
const write = (address: Partial<PlaceAddress>, onto = '') =>
  writeAddress({ ...noAddress, ...address }, new URLSearchParams(onto)).toString()

const anyPair = (min: number, max: number) =>
  fc
    .tuple(fc.integer({ min, max }), fc.integer({ min, max }))
    .map(([a, b]) => [Math.min(a, b), Math.max(a, b)] as const)
const anyWhere: fc.Arbitrary<PlaceWhere> = fc.oneof(
  fc
    .tuple(anyPair(-20, 4000), fc.option(fc.integer({ min: 1, max: 99 })))
    .map(([[firstBar, lastBar], pass]) => ({ kind: 'bars' as const, pass, firstBar, lastBar })),
  anyPair(0, 21_600_000).map(([start, end]) => ({ kind: 'at' as const, startSec: start / 1000, endSec: end / 1000 }))
)
const anyAddress: fc.Arbitrary<PlaceAddress> = fc.record({
  where: fc.option(anyWhere),
  comment: fc.option(fc.uuid()),
  speed: fc.option(fc.integer({ min: 20, max: 150 }).filter((speed) => speed !== 100)),
  loop: fc.boolean()
})

describe('readAddress and writeAddress', () => {
  it('read back what was written, whatever it was', () => {
    fc.assert(
      fc.property(anyAddress, (address) => {
        expect(readAddress(writeAddress(address))).toEqual(address)
      })
    )
  })

  it('read the addresses product.md names', () => {
    expect(read('bars=49-52').where).toEqual({ kind: 'bars', pass: null, firstBar: 49, lastBar: 52 })
    expect(read('pass=2&bars=17-20').where).toEqual({ kind: 'bars', pass: 2, firstBar: 17, lastBar: 20 })
    expect(read('at=12.5-20.25').where).toEqual({ kind: 'at', startSec: 12.5, endSec: 20.25 })
    expect(read('bars=19&speed=60&loop=1')).toEqual({
      where: { kind: 'bars', pass: null, firstBar: 19, lastBar: 19 },
      comment: null,
      speed: 60,
      loop: true
    })
  })

  it.each(['bars=', 'bars=x', 'bars=1-2-', 'bars=1e9', 'at=-3', 'at=1;2', 'speed=900', 'comment=<b>', 'pass=2'])(
    'pass over what cannot be read: %s',
    (query) => expect(read(query)).toEqual(noAddress)
  )

  it('leave out full speed and keep what is not theirs', () => {
    expect(write({ speed: 100 }, 'session=s&bars=1&pass=4&loop=1')).toBe('session=s')
  })
})

/** Four beats to a bar of two seconds; bar 1 begins at 1 s, so half a bar of pick-up comes first. */
const barMap = createBarMap({
  anchors: [1, 2].map((bar) => ({ id: `a${bar}`, sec: 1 + (bar - 1) * 2, position: { bar, beat: rational(1) } })),
  meters: [{ bar: 1, meter: meter('4/4') }],
  marks: []
}) as BarMap
const form = createFormMap({ marks: [{ bar: 1, formBar: 1, newPass: true }], formLength: 32, cyclic: true })
const ground = { barMap, form, durationSec: 200 }

describe('whereOfSpan', () => {
  it('names whole bars within their pass, or through the take without a form', () => {
    const span = barMap.barsSpan(49, 52)
    expect(whereOfSpan(span, ground)).toEqual({ kind: 'bars', pass: 2, firstBar: 17, lastBar: 20 })
    expect(whereOfSpan(span, { ...ground, form: null })).toEqual({
      kind: 'bars',
      pass: null,
      firstBar: 49,
      lastBar: 52
    })
  })

  it('counts through the take where a span goes over into the next pass', () => {
    expect(whereOfSpan(barMap.barsSpan(31, 34), ground)).toEqual({
      kind: 'bars',
      pass: null,
      firstBar: 31,
      lastBar: 34
    })
  })

  it('names a cut-off pick-up by its bar and beats by seconds', () => {
    expect(whereOfSpan({ startSec: 0, endSec: 1 }, ground)).toEqual({
      kind: 'bars',
      pass: null,
      firstBar: 0,
      lastBar: 0
    })
    expect(whereOfSpan({ startSec: 1, endSec: 2 }, ground)).toEqual({ kind: 'at', startSec: 1, endSec: 2 })
  })

  it('leads back to the bars it named, on any bar map', () => {
    fc.assert(
      fc.property(
        anyBarMapBody(),
        anyPair(1, 80),
        fc.integer({ min: 1, max: 40 }),
        fc.boolean(),
        (body, pair, length, cyclic) => {
          const map = createBarMap(body)
          if (!map) return
          const [first, last] = pair
          const place = {
            barMap: map,
            form: createFormMap({ marks: body.marks, formLength: length, cyclic }),
            durationSec: Math.max(1, map.barSec(200))
          }
          const whole = map.barsSpan(first, last)
          const span = { startSec: Math.max(0, whole.startSec), endSec: whole.endSec }
          fc.pre(span.endSec - span.startSec > 0.01)
          const found = spanOfWhere(whereOfSpan(span, place), place)
          expect(found?.startSec).toBeCloseTo(span.startSec, 5)
          expect(found?.endSec).toBeCloseTo(span.endSec, 5)
        }
      )
    )
  })
})

describe('spanOfWhere', () => {
  it('finds nothing where the take has no such bars', () => {
    const bars = (firstBar: number, pass: number | null = null): PlaceWhere => ({
      kind: 'bars',
      pass,
      firstBar,
      lastBar: firstBar
    })
    expect(spanOfWhere(bars(500), ground)).toBeNull()
    expect(spanOfWhere(bars(40, 1), ground)).toBeNull()
    expect(spanOfWhere(bars(4, 1), { ...ground, form: null })).toBeNull()
    expect(spanOfWhere(bars(4), { ...ground, barMap: null })).toBeNull()
    expect(spanOfWhere({ kind: 'at', startSec: 300, endSec: 301 }, ground)).toBeNull()
  })

  it('ends with the take', () => {
    expect(spanOfWhere({ kind: 'at', startSec: 190, endSec: 250 }, ground)).toEqual({ startSec: 190, endSec: 200 })
  })
})
