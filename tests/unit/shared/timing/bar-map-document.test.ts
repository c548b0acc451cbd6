import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { createBarMap } from '@shared/timing/bar-map'
import { barMapDocument, emptyBarMap } from '@shared/timing/bar-map-document'
import type { BarMapOperation } from '@shared/timing/bar-map-schema'
import { rational } from '@shared/timing/rational'
import type { Anchor, BarMapBody, FormMark, Position } from '@shared/timing/types'
import { MAX_ANCHORS, validateBarMap } from '@shared/timing/validate-bar-map'
import { anyBarMapBody, meter } from './random-bar-map'

const at = (bar: number, n = 1, d = 1): Position => ({ bar, beat: rational(n, d) })
const anchor = (id: string, sec: number, position: Position): Anchor => ({ id, sec, position })
const lines = (text = '4/4', bars = 5): BarMapBody => ({
  anchors: Array.from({ length: bars }, (_, i) => anchor(`a${i}`, i * 2, at(i + 1))),
  meters: [{ bar: 1, meter: meter(text) }],
  marks: []
})
const must = (body: BarMapBody, op: BarMapOperation): BarMapBody => {
  const result = barMapDocument.apply(body, op)
  if (!result.ok) throw new Error(result.error.message)
  return result.value
}
const refusal = (body: BarMapBody, op: BarMapOperation): string => {
  const result = barMapDocument.apply(body, op)
  return result.ok ? 'accepted' : result.error.message
}
const places = (body: BarMapBody) =>
  body.anchors.map(({ position: { bar, beat } }) => `${bar}.${beat.d === 1 ? beat.n : `${beat.n}/${beat.d}`}`)

/** An operation of any kind that has a fair chance to fit the body. */
const anyOperation = (body: BarMapBody): fc.Arbitrary<BarMapOperation> => {
  const span = { min: body.anchors[0]?.sec ?? 0, max: (body.anchors.at(-1)?.sec ?? 0) + 5 }
  const sec = fc.double({ ...span, noNaN: true })
  const bar = fc.integer({ min: -3, max: 40 })
  const id = fc.constantFrom(...body.anchors.map((known) => known.id), 'unknown')
  const place = createBarMap(body)?.positionAt
  const newAnchor = fc
    .tuple(fc.constantFrom('n1', 'n2', 'a0'), sec, fc.integer({ min: 1, max: 40 }))
    .map(([name, when, b]) => anchor(name, when, place?.(when) ?? at(b)))
  const anyMeter = fc.constantFrom('4/4', '3/4', '6/8', '5/4', '2/4').map(meter)
  const mark: fc.Arbitrary<FormMark> = fc.record({
    bar,
    formBar: fc.option(fc.integer({ min: 1, max: 32 })),
    newPass: fc.boolean()
  })
  return fc.oneof(
    newAnchor.map((a): BarMapOperation => ({ kind: 'setAnchor', anchor: a })),
    fc.tuple(id, fc.double({ min: -0.4, max: 0.4, noNaN: true })).map(([name, by]): BarMapOperation => {
      const known = body.anchors.find((candidate) => candidate.id === name)
      return { kind: 'moveAnchor', id: name, sec: (known?.sec ?? 0) + by }
    }),
    id.map((name): BarMapOperation => ({ kind: 'removeAnchor', id: name })),
    fc.tuple(sec, sec, newAnchor).map(([a, b, extra]): BarMapOperation => {
      const [fromSec, toSec] = [Math.min(a, b), Math.max(a, b)]
      const anchors = extra.sec >= fromSec && extra.sec <= toSec ? [extra] : []
      return { kind: 'replaceAnchors', fromSec, toSec, anchors }
    }),
    fc
      .tuple(fc.integer({ min: -40, max: 40 }), fc.constantFrom(1, 2, 3, 4))
      .map(([n, d]): BarMapOperation => ({ kind: 'shiftBeats', beats: rational(n, d) })),
    fc.constantFrom<BarMapOperation>({ kind: 'halve' }, { kind: 'double' }),
    sec.map((when): BarMapOperation => ({ kind: 'setBarOne', position: place?.(when) ?? at(2) })),
    fc.tuple(bar, anyMeter).map(([b, m]): BarMapOperation => ({ kind: 'setMeter', bar: b, meter: m })),
    fc
      .constantFrom(...body.meters.map((known) => known.bar), 7)
      .map((b): BarMapOperation => ({ kind: 'removeMeter', bar: b })),
    mark.map((m): BarMapOperation => ({ kind: 'setMark', mark: m })),
    fc
      .constantFrom(...body.marks.map((known) => known.bar), 7)
      .map((b): BarMapOperation => ({ kind: 'removeMark', bar: b })),
    bar.map((b): BarMapOperation => ({ kind: 'insertBar', bar: b })),
    bar.map((b): BarMapOperation => ({ kind: 'removeBar', bar: b })),
    anyBarMapBody({ maxAnchors: 5 }).map((other): BarMapOperation => ({ kind: 'setAll', body: other }))
  )
}

const bodyAndOperation = anyBarMapBody({ minAnchors: 1, maxAnchors: 12 }).chain((body) =>
  anyOperation(body).map((op) => ({ body, op }))
)

describe('bar map document', () => {
  it('takes any operation back exactly', () => {
    const applied = new Map<string, number>()
    fc.assert(
      fc.property(bodyAndOperation, ({ body, op }) => {
        const copy = JSON.parse(JSON.stringify(body)) as BarMapBody
        const after = barMapDocument.apply(body, op)
        expect(body).toEqual(copy)
        if (!after.ok) return
        applied.set(op.kind, (applied.get(op.kind) ?? 0) + 1)
        const back = barMapDocument.invert(body, op).reduce(must, after.value)
        expect(back).toEqual(body)
      }),
      { numRuns: 800 }
    )
    // Every kind was really applied, or the property says nothing about it.
    expect(applied.size).toBe(15)
  }, 30_000)

  it('takes a row of operations back in reverse order', () => {
    fc.assert(
      fc.property(anyBarMapBody({ maxAnchors: 8 }), fc.gen(), (start, gen) => {
        let body = start
        const undo: BarMapOperation[][] = []
        for (let i = 0; i < 6; i += 1) {
          const op = gen(anyOperation, body)
          const after = barMapDocument.apply(body, op)
          if (!after.ok) continue
          undo.unshift(barMapDocument.invert(body, op))
          body = after.value
        }
        expect(undo.flat().reduce(must, body)).toEqual(start)
      }),
      { numRuns: 80 }
    )
  }, 30_000)

  it('leaves only sound bodies, which the wire accepts', () => {
    fc.assert(
      fc.property(bodyAndOperation, ({ body, op }) => {
        expect(barMapDocument.operation.safeParse(op).success).toBe(true)
        const after = barMapDocument.apply(body, op)
        if (!after.ok) {
          expect(after.error.message).toMatch(/\.$/)
          return
        }
        expect(validateBarMap(after.value).ok).toBe(true)
        expect(barMapDocument.body.parse(after.value)).toEqual(after.value)
      }),
      { numRuns: 300 }
    )
  })

  it('keeps every second where it sounds when bars are only counted anew', () => {
    fc.assert(
      fc.property(anyBarMapBody({ maxAnchors: 8 }), (body) => {
        for (const op of [
          { kind: 'setMeter', bar: 3, meter: meter('3/4') },
          { kind: 'shiftBeats', beats: rational(1) },
          { kind: 'halve' }
        ] satisfies BarMapOperation[]) {
          const after = barMapDocument.apply(body, op)
          if (after.ok) expect(after.value.anchors.map(({ sec }) => sec)).toEqual(body.anchors.map(({ sec }) => sec))
        }
      })
    )
  })

  it('bounds what travels', () => {
    const many = Array.from({ length: MAX_ANCHORS + 1 }, (_, i) => anchor(`a${i}`, i, at(i + 1)))
    expect(barMapDocument.body.safeParse({ ...emptyBarMap, anchors: many }).success).toBe(false)
    expect(barMapDocument.body.safeParse(emptyBarMap).success).toBe(true)
    expect(barMapDocument.operation.safeParse({ kind: 'moveAnchor', id: 'a', sec: Infinity }).success).toBe(false)
    expect(barMapDocument.operation.safeParse({ kind: 'shiftBeats', beats: { n: 1, d: 0 } }).success).toBe(false)
    expect(Object.keys(z.toJSONSchema(barMapDocument.operation))).toContain('oneOf')
  })
})

describe('edits of the bar map', () => {
  it('refuses to move a place past its neighbour', () => {
    expect(refusal(lines(), { kind: 'moveAnchor', id: 'a1', sec: 4.5 })).toMatch(/cannot be bar 2 after bar 3/)
    expect(refusal(lines(), { kind: 'moveAnchor', id: 'gone', sec: 4.5 })).toMatch(/no longer/)
  })

  it('puts new places instead of those of a stretch', () => {
    const op: BarMapOperation = { kind: 'replaceAnchors', fromSec: 2, toSec: 6, anchors: [anchor('n', 3.9, at(3))] }
    const after = must(lines(), op)
    expect(after.anchors.map(({ sec }) => sec)).toEqual([0, 3.9, 8])
    expect(refusal(lines(), { ...op, anchors: [anchor('n', 7, at(3))] })).toMatch(/outside the stretch/)
  })

  it('shifts the count by beats, over bar lines and by thirds', () => {
    expect(places(must(lines('4/4', 2), { kind: 'shiftBeats', beats: rational(1) }))).toEqual(['1.2', '2.2'])
    expect(places(must(lines('4/4', 2), { kind: 'shiftBeats', beats: rational(-1) }))).toEqual(['0.4', '1.4'])
    expect(places(must(lines('4/4', 2), { kind: 'shiftBeats', beats: rational(-1, 3) }))).toEqual(['0.14/3', '1.14/3'])
  })

  it('doubles and halves the beats in the same time', () => {
    const body = { ...lines('4/4', 3), marks: [{ bar: 3, formBar: 1, newPass: true }] }
    const doubled = must(body, { kind: 'double' })
    expect(places(doubled)).toEqual(['1.1', '3.1', '5.1'])
    expect(doubled.marks[0]?.bar).toBe(5)
    expect(createBarMap(doubled)?.tempoAt(1)).toBe(240)
    const halved = must(lines('4/4', 3), { kind: 'halve' })
    expect(places(halved)).toEqual(['1.1', '1.3', '2.1'])
    expect(createBarMap(halved)?.tempoAt(1)).toBe(60)
  })

  it('makes any place bar 1 and counts meters and marks with it', () => {
    const body: BarMapBody = {
      ...lines(),
      meters: [
        { bar: 1, meter: meter('4/4') },
        { bar: 6, meter: meter('3/4') }
      ],
      marks: [{ bar: 3, formBar: 1, newPass: true }]
    }
    const after = must(body, { kind: 'setBarOne', position: at(3) })
    expect(places(after)).toEqual(['-1.1', '0.1', '1.1', '2.1', '3.1'])
    expect([after.meters[1]?.bar, after.marks[0]?.bar]).toEqual([4, 1])
    // A pick-up of one beat: what was bar 1 beat 2 is bar 1 beat 1.
    expect(places(must(lines('4/4', 2), { kind: 'setBarOne', position: at(1, 2) }))).toEqual(['0.4', '1.4'])
  })

  it('groups the same beats into the bars of another meter', () => {
    const beats: BarMapBody = {
      ...lines(),
      anchors: Array.from({ length: 9 }, (_, i) => anchor(`b${i}`, i / 2, at(1 + Math.floor(i / 4), 1 + (i % 4)))),
      marks: [{ bar: 4, formBar: 1, newPass: true }]
    }
    const waltz = must(beats, { kind: 'setMeter', bar: 1, meter: meter('3/4') })
    expect(places(waltz)).toEqual(['1.1', '1.2', '1.3', '2.1', '2.2', '2.3', '3.1', '3.2', '3.3'])
    expect(waltz.marks[0]?.bar).toBe(5)
    // A felt beat stays a felt beat: quarters become dotted quarters.
    const compound = must(beats, { kind: 'setMeter', bar: 1, meter: meter('6/8') })
    expect(places(compound).slice(0, 4)).toEqual(['1.1', '1.4', '2.1', '2.4'])
  })

  it('sets a single bar of two in the middle without moving a beat', () => {
    const two = must(lines(), { kind: 'setMeter', bar: 2, meter: meter('2/4') })
    const back = must(two, { kind: 'setMeter', bar: 3, meter: meter('4/4') })
    expect(places(back)).toEqual(['1.1', '2.1', '3.3', '4.3', '5.3'])
    expect(createBarMap(back)?.tempoAt(5)).toBe(120)
    expect(refusal(back, { kind: 'removeMeter', bar: 1 })).toMatch(/first meter/)
    expect(refusal(back, { kind: 'removeMeter', bar: 9 })).toMatch(/does not change at bar 9/)
  })

  it('inserts a bar that was not counted and removes one counted too much', () => {
    const body = { ...lines(), marks: [{ bar: 3, formBar: 1, newPass: true }] }
    const more = must(body, { kind: 'insertBar', bar: 3 })
    expect(places(more)).toEqual(['1.1', '2.1', '4.1', '5.1', '6.1'])
    expect(more.marks[0]?.bar).toBe(4)
    const less = must(body, { kind: 'removeBar', bar: 2 })
    expect(places(less)).toEqual(['1.1', '2.1', '3.1', '4.1'])
    expect(less.marks[0]?.bar).toBe(2)
  })
})

describe('parts of the bar map', () => {
  const { parts } = barMapDocument
  const clash = (body: BarMapBody, a: BarMapOperation, b: BarMapOperation) => {
    const [left, right] = [parts(body, a), parts(body, b)]
    return left.includes('*') || right.includes('*') || left.some((part) => right.includes(part))
  }
  const move = (id: string, sec: number): BarMapOperation => ({ kind: 'moveAnchor', id, sec })

  it('lets two people move different bar lines', () => {
    expect(clash(lines(), move('a1', 2.1), move('a2', 4.1))).toBe(false)
    const mark: FormMark = { bar: 3, formBar: 1, newPass: true }
    expect(clash(lines(), move('a1', 2.1), { kind: 'setMark', mark })).toBe(false)
  })

  it('has them meet on the same bar line, also under two ids', () => {
    expect(clash(lines(), move('a1', 2.1), move('a1', 2.2))).toBe(true)
    expect(clash(lines(), move('a1', 2.1), { kind: 'removeAnchor', id: 'a1' })).toBe(true)
    const fix = (id: string): BarMapOperation => ({ kind: 'setAnchor', anchor: anchor(id, 10, at(6)) })
    expect(clash(lines(), fix('mine'), fix('yours'))).toBe(true)
    expect(clash(lines(), { kind: 'removeMark', bar: 3 }, { kind: 'removeMark', bar: 3 })).toBe(true)
  })

  it('counts what counts anew as touching everything', () => {
    for (const kind of ['halve', 'double'] as const) expect(parts(lines(), { kind })).toEqual(['*'])
    expect(parts(lines(), { kind: 'shiftBeats', beats: rational(1) })).toEqual(['*'])
  })

  it('merges moves of different bar lines to the same body in either order', () => {
    const [a, b] = [move('a1', 2.1), move('a2', 4.1)]
    expect(must(must(lines(), a), b)).toEqual(must(must(lines(), b), a))
  })
})
