import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { crowdSpan, rowsUsed, spanRows, spanTargetPx, stackSpans } from '@client/timeline/stack-spans'

const item = (id: string, startSec: number, endSec: number) => ({ id, span: { startSec, endSec } })

const spans = fc.array(
  fc.record({
    start: fc.double({ min: 0, max: 600, noNaN: true }),
    length: fc.double({ min: 0, max: 20, noNaN: true })
  }),
  { maxLength: 120 }
)
const scales = fc.double({ min: 0.2, max: 500, noNaN: true })
const build = (list: { start: number; length: number }[]) =>
  list.map(({ start, length }, index) => item(String(index), start, start + length))

describe('stackSpans', () => {
  it('keeps spans that do not touch in one row', () => {
    expect(stackSpans([item('a', 0, 2), item('b', 3, 4)], 100).map(({ row }) => row)).toEqual([0, 0])
  })

  it('stacks what overlaps, the earlier one on top', () => {
    const placed = stackSpans([item('late', 1, 5), item('early', 0, 4)], 100)
    expect(placed.map((p) => (p.kind === 'span' ? [p.item.id, p.row] : []))).toEqual([
      ['early', 0],
      ['late', 1]
    ])
  })

  it('places every span exactly once, alone or in a crowd', () => {
    fc.assert(
      fc.property(spans, scales, (list, scale) => {
        const ids = stackSpans(build(list), scale).flatMap((p) =>
          p.kind === 'span' ? [p.item.id] : p.items.map((i) => i.id)
        )
        expect(ids.sort()).toEqual(list.map((_, index) => String(index)).sort())
      })
    )
  })

  it('leaves every sign in a row a target of its own', () => {
    fc.assert(
      fc.property(spans, scales, (list, scale) => {
        const placed = stackSpans(build(list), scale)
        for (let row = 0; row <= spanRows; row += 1) {
          const inRow = placed.filter((p) => p.row === row).sort((a, b) => a.x - b.x)
          for (let n = 1; n < inRow.length; n += 1) {
            const gap = (inRow[n]?.x ?? 0) - (inRow[n - 1]?.x ?? 0)
            expect(gap).toBeGreaterThanOrEqual(spanTargetPx)
          }
        }
        expect(rowsUsed(placed)).toBeLessThanOrEqual(spanRows + 1)
      })
    )
  })

  it('says which stretch a crowd covers', () => {
    expect(crowdSpan([item('a', 4, 9), item('b', 2, 5)])).toEqual({ startSec: 2, endSec: 9 })
  })
})
