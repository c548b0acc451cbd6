import { createFormMap, type FormPlan, type TakePart } from '@shared/timing/passes'
import { sectionAt, type SectionStart } from '@shared/timing/sections'
import type { BarIndex } from '@shared/units'

/** A cell of the form strip; `formBar` is null where no bar number of the form stands. Cells of one column belong together. */
export interface FormCell {
  bar: BarIndex
  formBar: number | null
  column: number
}

export interface FormRow {
  kind: TakePart['kind']
  pass: number | null
  /** The section this row is, in a form that does not come round. */
  section: SectionStart | null
  cells: FormCell[]
}

export interface FormRowsInput extends FormPlan {
  sections: readonly SectionStart[]
  firstBar: BarIndex
  lastBar: BarIndex
}

const PLAIN_WIDTH = 8

/**
 * Rows of the form strip from first to last bar: a cyclic form has one row a pass, another form one row a section (or eight
 * bars), a take without a form rows of eight bars; introduction, interlude, ending and pick-up are rows of their own. Where
 * a mark goes back within the form a new row starts, so the columns of a row always rise.
 */
export const formRows = ({ sections, firstBar, lastBar, ...plan }: FormRowsInput): FormRow[] => {
  const { partOf } = createFormMap(plan)
  const bySection = !plan.cyclic && sections.length > 0
  const rows: FormRow[] = []
  for (let bar = firstBar; bar <= lastBar; bar += 1) {
    const part = partOf(bar)
    const section = part.kind === 'pass' && bySection ? sectionAt(sections, part.bar) : null
    const last = rows.at(-1)
    const column = columnOf(part, section, plan)
    const cell = { bar, formBar: part.kind === 'pass' ? part.bar : null, column }
    const goesOn =
      last?.kind === part.kind &&
      last.pass === part.pass &&
      last.section === section &&
      column > (last.cells.at(-1)?.column ?? 0)
    if (last && goesOn) last.cells.push(cell)
    else rows.push({ kind: part.kind, pass: part.pass, section, cells: [cell] })
  }
  return rows
}

const columnOf = (part: TakePart, section: SectionStart | null, plan: FormPlan): number => {
  if (section) return part.bar - section.formBar
  if (part.kind === 'pass' && plan.cyclic) return part.bar - 1
  const width = plan.cyclic ? Math.max(PLAIN_WIDTH, plan.formLength) : PLAIN_WIDTH
  // Pick-up bars are 0 and below; counted from the right end of a row they lead up to the first bar.
  return (((part.bar - 1) % width) + width) % width
}
