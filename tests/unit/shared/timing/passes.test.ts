import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { formRows } from '@shared/timing/form-rows'
import { createFormMap, type FormPlan } from '@shared/timing/passes'
import type { FormMark } from '@shared/timing/types'

const mark = (bar: number, formBar: number | null, newPass = true): FormMark => ({ bar, formBar, newPass })
const chorus: FormPlan = { marks: [mark(1, 1)], formLength: 32, cyclic: true }
const where = (plan: FormPlan, bar: number) => {
  const place = createFormMap(plan).formPlaceOf(bar)
  return place && `${place.pass}:${place.formBar ?? (place.beyond ? 'beyond' : 'none')}`
}

const anyPlan: fc.Arbitrary<FormPlan> = fc
  .record({
    marks: fc.uniqueArray(
      fc.record({
        bar: fc.integer({ min: -5, max: 150 }),
        formBar: fc.option(fc.integer({ min: 1, max: 24 })),
        newPass: fc.boolean()
      }),
      { selector: (m) => m.bar, maxLength: 6 }
    ),
    formLength: fc.integer({ min: 0, max: 24 }),
    cyclic: fc.boolean()
  })
  .map((plan) => ({ ...plan, marks: plan.marks.sort((a, b) => a.bar - b.bar) }))

describe('passes through the form', () => {
  it('opens the next pass at the end of a cyclic form', () => {
    expect([1, 32, 33, 51, 97].map((bar) => where(chorus, bar))).toEqual(['1:1', '1:32', '2:1', '2:19', '4:1'])
  })

  it('goes beyond the end of a form that does not come round', () => {
    expect([32, 33].map((bar) => where({ ...chorus, cyclic: false }, bar))).toEqual(['1:32', '1:beyond'])
  })

  it('is nowhere in the form before the first mark and without a form', () => {
    expect(where(chorus, 0)).toBeNull()
    expect(where({ ...chorus, formLength: 0 }, 5)).toBeNull()
    expect(where({ ...chorus, marks: [] }, 5)).toBeNull()
    expect(where({ ...chorus, marks: [mark(1, null), mark(9, 1)] }, 4)).toBeNull()
  })

  it('opens the first pass at the first place in the form, said or not', () => {
    expect(where({ ...chorus, marks: [mark(9, 17, false)] }, 9)).toBe('1:17')
  })

  it('goes on in the pass when bars are repeated, dropped or added', () => {
    const repeated = { ...chorus, marks: [mark(1, 1), mark(9, 1, false)] }
    expect([8, 9, 40, 41].map((bar) => where(repeated, bar))).toEqual(['1:8', '1:1', '1:32', '2:1'])
    const dropped = { ...chorus, marks: [mark(1, 1), mark(9, 17, false)] }
    expect([8, 9, 25].map((bar) => where(dropped, bar))).toEqual(['1:8', '1:17', '2:1'])
    const added = { ...chorus, marks: [mark(1, 1), mark(17, null), mark(19, 17, false)] }
    expect([16, 17, 18, 19, 35].map((bar) => where(added, bar))).toEqual(['1:16', '1:none', '1:none', '1:17', '2:1'])
  })

  it('does not open a pass twice where a mark says what comes anyway', () => {
    expect(where({ ...chorus, marks: [mark(1, 1), mark(33, 1)] }, 33)).toBe('2:1')
  })

  it('finds the first bar of a place, and only what is played', () => {
    const map = createFormMap({ ...chorus, marks: [mark(5, 1), mark(21, 9, false)] })
    expect(map.barOf(1, 1)).toBe(5)
    expect(map.barOf(1, 9)).toBe(13)
    expect(map.barOf(1, 17)).toBe(29)
    expect(map.barOf(2, 1)).toBe(45)
    expect(map.barOf(1, 33)).toBeNull()
    expect(map.barOf(0, 1)).toBeNull()
    expect(createFormMap({ ...chorus, cyclic: false }).barOf(2, 1)).toBeNull()
  })

  it('leads from any bar in the form to that place and from any place found back to it', () => {
    fc.assert(
      fc.property(anyPlan, fc.integer({ min: -10, max: 300 }), (plan, bar) => {
        const map = createFormMap(plan)
        const place = map.formPlaceOf(bar)
        if (!place || place.formBar === null) return
        expect(place.formBar).toBeGreaterThanOrEqual(1)
        expect(place.formBar).toBeLessThanOrEqual(plan.formLength)
        const first = map.barOf(place.pass, place.formBar)
        expect(first).not.toBeNull()
        expect(first as number).toBeLessThanOrEqual(bar)
        expect(map.formPlaceOf(first as number)).toEqual(place)
      }),
      { numRuns: 1000 }
    )
  })

  it('never goes back to an earlier pass', () => {
    fc.assert(
      fc.property(anyPlan, (plan) => {
        const map = createFormMap(plan)
        let pass = 0
        for (let bar = -10; bar < 200; bar += 1) {
          const next = map.formPlaceOf(bar)?.pass ?? 0
          expect(next).toBeGreaterThanOrEqual(pass)
          pass = next
        }
      })
    )
  })
})

describe('rows of the form strip', () => {
  const aaba = ['A', 'A', 'B', 'A'].map((name, i) => ({ name, occurrence: 1, formBar: i * 8 + 1 }))
  const rowsOf = (plan: FormPlan, firstBar: number, lastBar: number, sections = aaba) =>
    formRows({ ...plan, sections, firstBar, lastBar })
  const outline = (rows: ReturnType<typeof rowsOf>) =>
    rows.map(({ kind, pass, cells }) => `${kind} ${pass ?? '-'}: ${cells[0]?.bar}-${cells.at(-1)?.bar}`)

  it('has one row a chorus, so that a bar of the form keeps its column', () => {
    const rows = rowsOf(chorus, 0, 70)
    expect(outline(rows)).toEqual(['pick-up -: 0-0', 'pass 1: 1-32', 'pass 2: 33-64', 'pass 3: 65-70'])
    expect(rows[1]?.cells[18]).toEqual({ bar: 19, formBar: 19, column: 18 })
    expect(rows[2]?.cells[18]).toEqual({ bar: 51, formBar: 19, column: 18 })
  })

  it('has the sections of a song as rows', () => {
    const rows = rowsOf({ ...chorus, cyclic: false }, 1, 36)
    expect(outline(rows)).toEqual(['pass 1: 1-8', 'pass 1: 9-16', 'pass 1: 17-24', 'pass 1: 25-32', 'ending 1: 33-36'])
    expect(rows.map(({ section }) => section?.formBar ?? null)).toEqual([1, 9, 17, 25, null])
    expect(rows[2]?.cells[0]).toEqual({ bar: 17, formBar: 17, column: 0 })
  })

  it('has rows of eight bars without a form', () => {
    const rows = rowsOf({ marks: [], formLength: 0, cyclic: false }, -1, 20, [])
    expect(outline(rows)).toEqual(['pick-up -: -1-0', 'bars -: 1-8', 'bars -: 9-16', 'bars -: 17-20'])
    expect(rows[0]?.cells.map(({ column }) => column)).toEqual([6, 7])
  })

  it('keeps a free introduction, an interlude and an ending as rows without bar numbers', () => {
    const rows = rowsOf({ ...chorus, marks: [mark(5, 1), mark(37, null), mark(41, 1), mark(73, null)] }, 1, 75)
    expect(outline(rows)).toEqual([
      'introduction -: 1-4',
      'pass 1: 5-36',
      'interlude 1: 37-40',
      'pass 2: 41-72',
      'ending 2: 73-75'
    ])
    for (const row of rows) {
      for (const { formBar } of row.cells) expect(formBar === null).toBe(row.kind !== 'pass')
    }
  })

  it('holds every bar once, in order, with columns that rise in each row', () => {
    fc.assert(
      fc.property(
        anyPlan,
        fc.integer({ min: -5, max: 5 }),
        fc.integer({ min: 0, max: 200 }),
        (plan, firstBar, count) => {
          const rows = rowsOf(plan, firstBar, firstBar + count, [])
          const bars = rows.flatMap(({ cells }) => cells.map(({ bar }) => bar))
          expect(bars).toEqual(Array.from({ length: count + 1 }, (_, i) => firstBar + i))
          for (const { cells } of rows) {
            cells.forEach(({ column }, i) => {
              expect(column).toBeGreaterThanOrEqual(0)
              if (i > 0) expect(column).toBeGreaterThan(cells[i - 1]?.column ?? 0)
            })
          }
        }
      )
    )
  })
})
