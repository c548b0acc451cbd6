// How the rows of the form fit a width, and how keys move through them. Pure.
import type { FormCell, FormRow } from '@shared/timing/form-rows'
import type { BarIndex } from '@shared/units'

/** Narrower cells are no targets (WCAG 2.2, 2.5.8): the row breaks into lines of 16 or 8 bars instead. */
export const leastCellPx = 24

export interface StripLine {
  key: string
  row: FormRow
  /** The first line of its row carries the row's name. */
  isFirst: boolean
  cells: FormCell[]
  /** Column of the first cell's place in the line. */
  firstColumn: number
}

export const columnsOf = (rows: readonly FormRow[]): number =>
  rows.reduce((most, { cells }) => Math.max(most, (cells.at(-1)?.column ?? 0) + 1), 1)

/** Bars on a line: all of a row if they fit, otherwise the largest of 32, 16, 8, 4 that does. */
export const barsPerLine = (columns: number, widthPx: number): number => {
  if (columns * leastCellPx <= widthPx) return columns
  return [32, 16, 8].find((count) => count < columns && count * leastCellPx <= widthPx) ?? 4
}

export const stripLines = (rows: readonly FormRow[], perLine: number): StripLine[] =>
  rows.flatMap((row, rowIndex) => {
    const lines: StripLine[] = []
    for (const cell of row.cells) {
      const line = Math.floor(cell.column / perLine)
      const last = lines.at(-1)
      if (last && last.firstColumn === line * perLine) last.cells.push(cell)
      else
        lines.push({
          key: `${rowIndex}.${line}`,
          row,
          isFirst: lines.length === 0,
          cells: [cell],
          firstColumn: line * perLine
        })
    }
    return lines
  })

/** Where an arrow, Home or End leads from a bar; null for other keys and at the edges. */
export const barForKey = (lines: readonly StripLine[], bar: BarIndex, key: string): BarIndex | null => {
  const at = lines.findIndex(({ cells }) => cells.some((cell) => cell.bar === bar))
  const line = lines[at]
  const cell = line?.cells.find((each) => each.bar === bar)
  if (!line || !cell) return null
  const bars = lines.flatMap(({ cells }) => cells.map((each) => each.bar))
  const along = bars.indexOf(bar)
  if (key === 'ArrowRight') return bars[along + 1] ?? null
  if (key === 'ArrowLeft') return bars[along - 1] ?? null
  if (key === 'Home') return line.cells[0]?.bar ?? null
  if (key === 'End') return line.cells.at(-1)?.bar ?? null
  if (key === 'ArrowUp' || key === 'ArrowDown') {
    const other = lines[at + (key === 'ArrowUp' ? -1 : 1)]
    return other ? nearestInColumn(other, cell.column - line.firstColumn) : null
  }
  return null
}

const nearestInColumn = (line: StripLine, column: number): BarIndex | null => {
  const distance = (cell: FormCell) => Math.abs(cell.column - line.firstColumn - column)
  return (
    line.cells.reduce<FormCell | null>((best, cell) => (best && distance(best) <= distance(cell) ? best : cell), null)
      ?.bar ?? null
  )
}
