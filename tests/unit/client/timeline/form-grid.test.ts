import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { barForKey, barsPerLine, columnsOf, leastCellPx, stripLines } from '@client/timeline/form-grid'
import { formRows } from '@shared/timing/form-rows'

const chorus = (length: number, bars: number) =>
  formRows({
    marks: [{ bar: 1, formBar: 1, newPass: true }],
    formLength: length,
    cyclic: true,
    sections: [],
    firstBar: 1,
    lastBar: bars
  })

describe('barsPerLine', () => {
  it('keeps a chorus on one line where there is room and breaks it in sixteens or eights where not', () => {
    expect([
      barsPerLine(32, 900),
      barsPerLine(32, 500),
      barsPerLine(32, 330),
      barsPerLine(12, 330),
      barsPerLine(12, 200)
    ]).toEqual([32, 16, 8, 12, 8])
  })

  it('never makes a cell narrower than a target, down to the narrowest phone', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 64 }), fc.integer({ min: 280, max: 2000 }), (columns, width) => {
        expect(width / barsPerLine(columns, width)).toBeGreaterThanOrEqual(leastCellPx)
      })
    )
  })
})

describe('stripLines', () => {
  it('shows every bar once and in order, however lines break', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 40 }),
        fc.integer({ min: 1, max: 120 }),
        fc.constantFrom(4, 8, 16, 64),
        (length, bars, per) => {
          const lines = stripLines(chorus(length, bars), per)
          expect(lines.flatMap(({ cells }) => cells.map(({ bar }) => bar))).toEqual(
            Array.from({ length: bars }, (_, n) => n + 1)
          )
          for (const { cells, firstColumn } of lines)
            for (const { column } of cells) expect(column - firstColumn).toBeLessThan(per)
        }
      )
    )
  })

  it('names a row once, on its first line', () => {
    expect(stripLines(chorus(32, 64), 8).map(({ isFirst }) => isFirst)).toEqual([
      true,
      false,
      false,
      false,
      true,
      false,
      false,
      false
    ])
  })
})

describe('barForKey', () => {
  const lines = stripLines(chorus(32, 96), columnsOf(chorus(32, 96)))

  it('moves along the take, and up and down to the same bar of another chorus', () => {
    expect(barForKey(lines, 32, 'ArrowRight')).toBe(33)
    expect(barForKey(lines, 33, 'ArrowLeft')).toBe(32)
    expect(barForKey(lines, 19, 'ArrowDown')).toBe(51)
    expect(barForKey(lines, 51, 'ArrowUp')).toBe(19)
    expect([barForKey(lines, 40, 'Home'), barForKey(lines, 40, 'End')]).toEqual([33, 64])
  })

  it('stays where the take ends', () => {
    expect([
      barForKey(lines, 96, 'ArrowRight'),
      barForKey(lines, 1, 'ArrowLeft'),
      barForKey(lines, 5, 'ArrowUp'),
      barForKey(lines, 5, 'x')
    ]).toEqual([null, null, null, null])
  })

  it('finds the nearest bar where a shorter row has none in the column', () => {
    const short = stripLines(chorus(32, 40), 32)
    expect(barForKey(short, 20, 'ArrowDown')).toBe(40)
  })
})
