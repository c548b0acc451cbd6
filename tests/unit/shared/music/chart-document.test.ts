import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { chartDocument } from '@shared/music/chart-document'
import { chartLimits, type ChartOperation } from '@shared/music/chart-schema'
import type { ChartBody } from '@shared/music/types'
import { checkChart } from '@shared/music/validate-chart'

const { apply, invert, parts } = chartDocument

const IDS = ['a', 'b', 'c', 'd']
const sectionId = fc.constantFrom(...IDS)
const barText = fc.constantFrom('', '%', 'Dm7', 'Em7b5 A7', 'Dm7 . . G7', 'N.C.', 'hello', 'C . G')
const readable = fc.constantFrom('', '%', 'Dm7', 'Em7b5 A7', 'N.C.')
const name = fc.constantFrom('A', 'B', 'Bridge')
const index = fc.integer({ min: 0, max: 5 })
const section = (text: fc.Arbitrary<string>) =>
  fc.record({ id: sectionId, name, bars: fc.array(text, { maxLength: 4 }) })
const tempo = fc.option(fc.record({ min: fc.integer({ min: 40, max: 200 }), max: fc.integer({ min: 40, max: 200 }) }))

const body: fc.Arbitrary<ChartBody> = fc
  .record({
    key: fc.constantFrom('', 'G minor', 'Bb'),
    meter: fc.constantFrom('4/4', '3/4', '6/8'),
    tempo: fc.constant(null),
    cyclic: fc.boolean(),
    sections: fc.uniqueArray(section(readable), { selector: ({ id }) => id, maxLength: 4 }),
    order: fc.array(sectionId, { maxLength: 6 })
  })
  .map((some) => ({ ...some, order: some.order.filter((id) => some.sections.some((one) => one.id === id)) }))

const operation: fc.Arbitrary<ChartOperation> = fc.oneof(
  fc.record({ kind: fc.constant('setKey' as const), key: fc.constantFrom('', 'D dorian', 'H') }),
  fc.record({ kind: fc.constant('setMeter' as const), meter: fc.constantFrom('4/4', '5/4', '6/8', '4/5') }),
  fc.record({ kind: fc.constant('setTempo' as const), tempo }),
  fc.record({ kind: fc.constant('setCyclic' as const), cyclic: fc.boolean() }),
  fc.record({ kind: fc.constant('setBar' as const), sectionId, index, text: barText }),
  fc.record({ kind: fc.constant('insertBar' as const), sectionId, index, text: barText }),
  fc.record({ kind: fc.constant('removeBar' as const), sectionId, index }),
  fc.record({ kind: fc.constant('setBars' as const), sectionId, bars: fc.array(barText, { maxLength: 4 }) }),
  fc.record({ kind: fc.constant('addSection' as const), section: section(readable), at: index }),
  fc.record({ kind: fc.constant('renameSection' as const), sectionId, name }),
  fc.record({ kind: fc.constant('removeSection' as const), sectionId }),
  fc.record({ kind: fc.constant('moveSection' as const), sectionId, to: index }),
  fc.record({ kind: fc.constant('setOrder' as const), order: fc.array(sectionId, { maxLength: 5 }) }),
  fc.record({ kind: fc.constant('replaceChart' as const), body })
)

const start: ChartBody = {
  key: 'G minor',
  meter: '4/4',
  tempo: { min: 120, max: 160 },
  cyclic: true,
  sections: [
    { id: 'a', name: 'A', bars: ['Gm7', '%', 'Cm7 . . F7', 'Gm7'] },
    { id: 'b', name: 'B', bars: ['Cm7', ''] }
  ],
  order: ['a', 'a', 'b', 'a']
}

const applied = (some: ChartBody, op: ChartOperation): ChartBody => {
  const result = apply(some, op)
  if (!result.ok) throw new Error(result.error.message)
  return result.value
}
const refusal = (op: ChartOperation): string => {
  const result = apply(start, op)
  return result.ok ? '' : result.error.message
}

describe('chart operations', () => {
  it('never change the body they are given, and always end in a chart that can be read', () => {
    fc.assert(
      fc.property(body, operation, (before, op) => {
        const copy = structuredClone(before)
        const after = apply(before, op)
        expect(before).toEqual(copy)
        if (!after.ok) return
        expect(checkChart(after.value).ok).toBe(true)
        expect(chartDocument.body.safeParse(after.value).success).toBe(true)
      }),
      { numRuns: 400 }
    )
  })

  it('are taken back exactly by what invert gives', () => {
    fc.assert(
      fc.property(body, operation, (before, op) => {
        const after = apply(before, op)
        if (!after.ok) return
        expect(invert(before, op).reduce(applied, after.value)).toEqual(before)
      }),
      { numRuns: 1000 }
    )
  })

  it('come to the same chart in either order when they touch different parts', () => {
    fc.assert(
      fc.property(body, operation, operation, (before, one, other) => {
        const touched = parts(before, one)
        const apart =
          !touched.includes('*') && !parts(before, other).some((part) => part === '*' || touched.includes(part))
        const first = apply(before, one)
        const second = apply(before, other)
        if (!apart || !first.ok || !second.ok) return
        const both = apply(first.value, other)
        const turned = apply(second.value, one)
        // A meter and a bar may each be right alone and not together: then the later one is refused, whichever it is.
        expect(both.ok).toBe(turned.ok)
        if (both.ok && turned.ok) expect(both.value).toEqual(turned.value)
      }),
      { numRuns: 1000 }
    )
  })

  it('change what they name', () => {
    expect(applied(start, { kind: 'setBar', sectionId: 'b', index: 1, text: 'F7' }).sections[1]?.bars).toEqual([
      'Cm7',
      'F7'
    ])
    expect(applied(start, { kind: 'insertBar', sectionId: 'b', index: 2, text: 'F7' }).sections[1]?.bars).toEqual([
      'Cm7',
      '',
      'F7'
    ])
    expect(applied(start, { kind: 'removeBar', sectionId: 'a', index: 0 }).sections[0]?.bars).toEqual([
      '%',
      'Cm7 . . F7',
      'Gm7'
    ])
    expect(applied(start, { kind: 'removeSection', sectionId: 'a' })).toMatchObject({
      sections: [{ id: 'b' }],
      order: ['b']
    })
    expect(applied(start, { kind: 'moveSection', sectionId: 'a', to: 1 }).sections.map(({ id }) => id)).toEqual([
      'b',
      'a'
    ])
  })

  it('are refused with bar and reason when a bar cannot be read', () => {
    expect(refusal({ kind: 'setBar', sectionId: 'a', index: 1, text: 'hello' })).toMatch(/^Bar 2 of A: “hello”/)
    expect(refusal({ kind: 'insertBar', sectionId: 'b', index: 0, text: 'C . G7' })).toMatch(/^Bar 1 of B: 3 beats/)
    expect(refusal({ kind: 'setMeter', meter: '3/4' })).toMatch(/^Bar 3 of A: 4 beats are written, a bar of 3\/4 has 3/)
  })

  it('are refused when they name what is not there or go over a limit', () => {
    const long = Array.from({ length: 200 }, () => 'C'.padEnd(40))
    expect(refusal({ kind: 'setBar', sectionId: 'a', index: 4, text: 'C' })).toMatch(/no bar 5/)
    expect(refusal({ kind: 'renameSection', sectionId: 'z', name: 'Z' })).toMatch(/no such section/)
    expect(refusal({ kind: 'addSection', section: { id: 'a', name: 'A', bars: [] }, at: 0 })).toMatch(/already/)
    expect(refusal({ kind: 'setOrder', order: ['a', 'z'] })).toMatch(/order names a section/)
    expect(refusal({ kind: 'setTempo', tempo: { min: 200, max: 100 } })).toMatch(/slowest/)
    expect(refusal({ kind: 'setKey', key: 'sideways' })).toMatch(/key/)
    expect(refusal({ kind: 'setBars', sectionId: 'a', bars: long })).toMatch(`${chartLimits.text}`)
  })
})

describe('parts', () => {
  const meet = (one: ChartOperation, other: ChartOperation): boolean =>
    parts(start, one).some((part) => parts(start, other).includes(part))
  const set = (bar: number): ChartOperation => ({ kind: 'setBar', sectionId: 'a', index: bar, text: 'C' })

  it('keep different bars apart and the same bar together', () => {
    expect(meet(set(0), set(1))).toBe(false)
    expect(meet(set(1), set(1))).toBe(true)
    expect(meet(set(0), { kind: 'setBar', sectionId: 'b', index: 0, text: 'C' })).toBe(false)
  })

  it('let a shift of bars meet the bars it moves and other shifts, not the bars before it', () => {
    const insert: ChartOperation = { kind: 'insertBar', sectionId: 'a', index: 2, text: 'C' }
    expect([meet(insert, set(1)), meet(insert, set(2)), meet(insert, set(3))]).toEqual([false, true, true])
    expect(meet(insert, { kind: 'removeBar', sectionId: 'a', index: 3 })).toBe(true)
    expect(meet({ kind: 'removeSection', sectionId: 'a' }, set(0))).toBe(true)
  })
})

describe('chart schemas', () => {
  it('become JSON Schema as they stand, so that the interface description can be made from them', () => {
    expect(z.toJSONSchema(chartDocument.operation)).toHaveProperty('oneOf')
    expect(z.toJSONSchema(chartDocument.body)).toMatchObject({ type: 'object' })
  })

  it('take the empty chart and refuse what is over length', () => {
    expect(chartDocument.body.parse(chartDocument.empty)).toEqual(chartDocument.empty)
    expect(checkChart(chartDocument.empty).ok).toBe(true)
    const tooLong = { kind: 'setBar', sectionId: 'a', index: 0, text: 'C'.repeat(chartLimits.barText + 1) }
    expect(chartDocument.operation.safeParse(tooLong).success).toBe(false)
  })
})
