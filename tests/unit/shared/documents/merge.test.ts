import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import type { DocumentKind } from '@shared/documents/document'
import { applyAll, overlap } from '@shared/documents/merge'
import { err, ok } from '@shared/result'

/** The plainest document there is: named boxes with a number each; a number under 0 is refused. */
type Boxes = Record<string, number>
type Put = { box: string; value: number | null }
const boxes: DocumentKind<Boxes, Put> = {
  name: 'boxes',
  body: z.record(z.string(), z.number()),
  operation: z.object({ box: z.string(), value: z.number().nullable() }),
  empty: {},
  apply: (body, { box, value }) => {
    if (value !== null && value < 0) return err({ message: 'under nothing' })
    const { [box]: _, ...rest } = body
    return ok(value === null ? rest : { ...rest, [box]: value })
  },
  invert: (before, { box }) => [{ box, value: before[box] ?? null }],
  parts: (_, { box }) => [box]
}
const name = fc.constantFrom('a', 'b', 'c', 'd')
const put = fc.record({ box: name, value: fc.option(fc.nat(9)) })
const start = fc.dictionary(name, fc.nat(9))
const after = (body: Boxes, operations: Put[]): Boxes => {
  const applied = applyAll(boxes, body, operations)
  if (!applied.ok) throw new Error(applied.error.message)
  return applied.value.body
}

describe('applyAll', () => {
  it('is taken back as a whole by its inverse', () => {
    fc.assert(
      fc.property(start, fc.array(put, { maxLength: 8 }), (body, operations) => {
        const applied = applyAll(boxes, body, operations)
        expect(applied.ok && after(applied.value.body, applied.value.inverse)).toEqual(body)
      })
    )
  })
  it('names every part that it changed', () => {
    fc.assert(
      fc.property(start, fc.array(put, { maxLength: 8 }), (body, operations) => {
        const applied = applyAll(boxes, body, operations)
        if (!applied.ok) throw new Error('never')
        for (const box of ['a', 'b', 'c', 'd'])
          if (applied.value.body[box] !== body[box]) expect(applied.value.parts).toContain(box)
      })
    )
  })
  it('does nothing at all when one operation fails, and says which', () => {
    const body = { a: 1 }
    expect(
      applyAll(boxes, body, [
        { box: 'a', value: 2 },
        { box: 'b', value: -1 }
      ])
    ).toMatchObject({ ok: false, error: { index: 1 } })
    expect(body).toEqual({ a: 1 })
  })
})

describe('overlap', () => {
  it('allows exactly those pairs of edits whose order does not matter', () => {
    fc.assert(
      fc.property(
        start,
        fc.array(put, { minLength: 1, maxLength: 4 }),
        fc.array(put, { minLength: 1, maxLength: 4 }),
        (body, one, other) => {
          const parts = (operations: Put[]) => operations.map(({ box }) => box)
          if (overlap(parts(one), parts(other))) return
          expect(after(after(body, one), other)).toEqual(after(after(body, other), one))
        }
      )
    )
  })
  it('is the same both ways, and whole touches everything but nothing', () => {
    const parts = fc.array(fc.constantFrom('a', 'b', 'c', '*'), { maxLength: 3 })
    fc.assert(fc.property(parts, parts, (one, other) => overlap(one, other) === overlap(other, one)))
    expect([overlap(['*'], ['a']), overlap(['*'], []), overlap(['a'], ['b']), overlap(['a', 'b'], ['b'])]).toEqual([
      true,
      false,
      false,
      true
    ])
  })
})
