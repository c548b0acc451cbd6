// A chart typed as text turned into the smallest edit that makes it so: bars alone where the sections stay as they are.
import { applyAll } from '@shared/documents/merge'
import { chartDocument } from '@shared/music/chart-document'
import type { ChartOperation } from '@shared/music/chart-schema'
import { parseChartText, sectionsText, type BarFault, type TextSection } from '@shared/music/chart-text'
import type { ChartBody, ChartSection } from '@shared/music/types'
import { err, ok, type Result } from '@shared/result'
import { COMMON_METER, readMeter } from '@shared/timing/meter'

export interface TypedChart {
  operations: ChartOperation[]
  body: ChartBody
}

const isSame = (one: readonly string[], other: readonly string[]): boolean =>
  one.length === other.length && one.every((item, i) => item === other[i])

/** The chart as it is typed: every section once, under its name. */
export const textOfChart = ({ sections }: ChartBody): string => sectionsText(sections)

interface Laid {
  sections: ChartSection[]
  /** As typed: a section that comes again, or a name without bars, is played again. */
  order: string[]
  repeats: boolean
}

/** Gives typed sections the ids of those they stand for: by name, in order. */
const lay = (typed: readonly TextSection[], before: readonly ChartSection[], newId: () => string): Laid => {
  const free = [...before]
  const sections: ChartSection[] = []
  const order: string[] = []
  let repeats = false
  for (const { name, bars } of typed) {
    const again = sections.find((one) => one.name === name && (bars.length === 0 || isSame(one.bars, bars)))
    if (again) {
      order.push(again.id)
      repeats = true
      continue
    }
    const at = free.findIndex((section) => section.name === name)
    const id = at >= 0 ? (free.splice(at, 1)[0] as ChartSection).id : newId()
    sections.push({ id, name, bars })
    order.push(id)
  }
  return { sections, order, repeats }
}

const orderFor = ({ sections, order, repeats }: Laid, before: ChartBody): string[] => {
  if (repeats || before.order.length === 0) return order
  const ids = new Set(sections.map(({ id }) => id))
  const known = new Set(before.sections.map(({ id }) => id))
  return [...before.order.filter((id) => ids.has(id)), ...order.filter((id) => !known.has(id))]
}

/** Reads the whole chart; every faulty bar is named. No operations: nothing changed. */
export const chartFromText = (before: ChartBody, text: string, newId: () => string): Result<TypedChart, BarFault[]> => {
  const read = parseChartText(text, readMeter(before.meter) ?? COMMON_METER)
  if (!read.ok) return read
  const laid = lay(read.value.sections, before.sections, newId)
  const order = orderFor(laid, before)
  const sameSections = isSame(
    laid.sections.map(({ id }) => id),
    before.sections.map(({ id }) => id)
  )
  const operations: ChartOperation[] = sameSections
    ? laid.sections.flatMap((section, i) =>
        isSame(section.bars, before.sections[i]?.bars ?? [])
          ? []
          : [{ kind: 'setBars' as const, sectionId: section.id, bars: section.bars }]
      )
    : [{ kind: 'replaceChart', body: { ...before, sections: laid.sections, order } }]
  if (sameSections && !isSame(order, before.order)) operations.push({ kind: 'setOrder', order })
  const applied = applyAll(chartDocument, before, operations)
  return applied.ok ? ok({ operations, body: applied.value.body }) : err([{ bar: 0, message: applied.error.message }])
}

/** One section typed as text; headers inside it are refused. */
export const barsFromText = (before: ChartBody, text: string): Result<string[], BarFault[]> => {
  const read = parseChartText(text, readMeter(before.meter) ?? COMMON_METER)
  if (!read.ok) return read
  if (read.value.sections.length > 1)
    return err([{ bar: 0, message: 'Only the bars of one section belong here, without another name before them' }])
  return ok(read.value.bars)
}
