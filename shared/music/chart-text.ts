// A whole chart typed as text, `| Dm7 | Em7b5 A7 | % | N.C. |`, and back.
import { err, ok, type Result } from '@shared/result'
import { readBar } from '@shared/music/chart'
import type { Meter } from '@shared/timing/types'

/** A section as typed; the name is made up (A, B …) when none stands in the text. */
export interface TextSection {
  name: string
  bars: string[]
}

export interface ChartText {
  /** Every written bar in order. */
  bars: string[]
  sections: TextSection[]
}

export interface BarFault {
  /** Counted through the text from 1; 0 when the text as a whole is at fault. */
  bar: number
  message: string
}

/** Longest text that is read, and most bars it may hold. */
export const MAX_CHART_TEXT = 10_000
export const MAX_CHART_BARS = 1_000
/** After so many faulty bars the rest is not looked at: the text is no chart. */
const MOST_FAULTS = 20
/** Longest name of a section. */
export const MAX_SECTION_NAME = 40

interface TextLine {
  header: string | undefined
  cells: string[]
}

// `[A]` or `A:` before the first bar line. `:|` is a repeat sign, not the end of a header.
const HEADER = /^(?:\[([^\]|]{1,40})\]:?|([^|:[\]]{1,40}):(?!\|))/u

function readLine(line: string): TextLine {
  const header = HEADER.exec(line)
  const rest = header ? line.slice(header[0].length).trim() : line
  if (rest === '') return { header: (header?.[1] ?? header?.[2])?.trim(), cells: [] }
  const cells = rest.split(/\|[|\]]?/u).map((cell) => cell.trim())
  // What stands outside the outer bar lines is no bar.
  if (cells[0] === '') cells.shift()
  if (cells.at(-1) === '') cells.pop()
  return { header: (header?.[1] ?? header?.[2])?.trim(), cells }
}

const freeLetter = (sections: TextSection[]): string =>
  [...'ABCDEFGHIJKLMNOPQRSTUVWXYZ'].find((letter) => sections.every(({ name }) => name !== letter)) ?? 'A'

/**
 * Reads a typed chart. Bars stand between bar lines, lines are rows, `A:` or `[A]` at the start of a line begins a section.
 * Every faulty bar is named with its number in the text and the reason.
 */
export function parseChartText(text: string, meter: Meter): Result<ChartText, BarFault[]> {
  if (text.length > MAX_CHART_TEXT)
    return err([{ bar: 0, message: `A chart is at most ${MAX_CHART_TEXT} characters of text` }])
  const sections: TextSection[] = []
  const faults: BarFault[] = []
  let number = 0
  for (const line of text.split(/\r\n|\r|\n/u)) {
    if (line.trim() === '') continue
    const { header, cells } = readLine(line.trim())
    if (header !== undefined && header !== '') sections.push({ name: header, bars: [] })
    if (sections.length === 0) sections.push({ name: freeLetter(sections), bars: [] })
    for (const cell of cells) {
      number += 1
      if (faults.length >= MOST_FAULTS) return err(faults)
      const reason = cell.includes(':')
        ? 'repeat signs are not read here: write % for a bar, and the order of the sections for a section'
        : barReason(cell, meter)
      if (reason !== undefined) faults.push({ bar: number, message: `Bar ${number}: ${reason}` })
      sections.at(-1)?.bars.push(cell)
    }
  }
  if (number === 0) return err([{ bar: 0, message: 'No bar is written' }])
  if (number > MAX_CHART_BARS) return err([{ bar: 0, message: `A chart holds at most ${MAX_CHART_BARS} bars` }])
  if (faults.length > 0) return err(faults)
  return ok({ bars: sections.flatMap(({ bars }) => bars), sections })
}

function barReason(cell: string, meter: Meter): string | undefined {
  const read = readBar(cell, meter)
  return read.ok ? undefined : read.error.message
}

/** Bars as a line each of `perRow`: `| Dm7 | G7 |`. */
export function chartText(bars: string[], perRow = 4): string {
  const rows: string[] = []
  for (let first = 0; first < bars.length; first += perRow)
    rows.push(`| ${bars.slice(first, first + perRow).join(' | ')} |`.replace(/ {2,}/gu, ' '))
  return rows.join('\n')
}

/** Sections under their headers, as `parseChartText` reads them. */
export const sectionsText = (sections: TextSection[], perRow = 4): string =>
  sections.map(({ name, bars }) => `[${name}]\n${chartText(bars, perRow)}`).join('\n\n')
