// The chart as a document: typed edits that can be taken back and that merge when they touch different bars.
import type { DocumentKind, OperationFault } from '@shared/documents/document'
import { err, ok, type Result } from '@shared/result'
import { chartBodySchema, chartLimits, chartOperationSchema, type ChartOperation } from '@shared/music/chart-schema'
import type { ChartBody, ChartSection } from '@shared/music/types'
import {
  checkBars,
  checkChart,
  checkKey,
  checkLength,
  checkMeter,
  checkOrder,
  checkTempo
} from '@shared/music/validate-chart'

type Edited = Result<ChartBody, OperationFault>
type Of<Kind extends ChartOperation['kind']> = Extract<ChartOperation, { kind: Kind }>

const refuse = (message: string, ...path: (string | number)[]): { ok: false; error: OperationFault } =>
  err({ message, path })

const sectionOf = (body: ChartBody, id: string): ChartSection | undefined =>
  body.sections.find((section) => section.id === id)

const given = (body: ChartBody, checked: Result<unknown, OperationFault>): Edited => (checked.ok ? ok(body) : checked)

function inSection(
  body: ChartBody,
  id: string,
  change: (section: ChartSection) => Result<ChartSection, OperationFault>
): Edited {
  const section = sectionOf(body, id)
  if (!section) return refuse('The chart has no such section any more', 'sectionId')
  const changed = change(section)
  if (!changed.ok) return changed
  return ok({ ...body, sections: body.sections.map((other) => (other.id === id ? changed.value : other)) })
}

/** The section with other bars, once those at `touched` can be read. */
function withBars(
  body: ChartBody,
  section: ChartSection,
  bars: string[],
  touched: Iterable<number> = bars.keys()
): Result<ChartSection, OperationFault> {
  if (bars.length > chartLimits.barsPerSection)
    return refuse(`A section holds at most ${chartLimits.barsPerSection} bars`, 'bars')
  const meter = checkMeter(body.meter)
  if (!meter.ok) return meter
  const changed = { ...section, bars }
  const length = checkLength([...body.sections.filter(({ id }) => id !== section.id), changed])
  if (!length.ok) return length
  const checked = checkBars(changed, meter.value, touched)
  return checked.ok ? ok(changed) : checked
}

function spliced<Item>(items: Item[], at: number, remove: number, ...added: Item[]): Item[] {
  const changed = [...items]
  changed.splice(at, remove, ...added)
  return changed
}

const noSuchBar = (section: ChartSection, index: number) =>
  refuse(`${section.name} has no bar ${index + 1} any more`, 'index')

function setBar(body: ChartBody, { sectionId, index, text }: Of<'setBar'>): Edited {
  return inSection(body, sectionId, (section) => {
    if (index >= section.bars.length) return noSuchBar(section, index)
    return withBars(body, section, spliced(section.bars, index, 1, text), [index])
  })
}

function insertBar(body: ChartBody, { sectionId, index, text }: Of<'insertBar'>): Edited {
  return inSection(body, sectionId, (section) => {
    if (index > section.bars.length) return noSuchBar(section, index)
    return withBars(body, section, spliced(section.bars, index, 0, text), [index])
  })
}

function removeBar(body: ChartBody, { sectionId, index }: Of<'removeBar'>): Edited {
  return inSection(body, sectionId, (section) => {
    if (index >= section.bars.length) return noSuchBar(section, index)
    return ok({ ...section, bars: spliced(section.bars, index, 1) })
  })
}

function addSection(body: ChartBody, { section, at }: Of<'addSection'>): Edited {
  if (sectionOf(body, section.id)) return refuse('The chart already has this section', 'section', 'id')
  if (body.sections.length >= chartLimits.sections)
    return refuse(`A chart holds at most ${chartLimits.sections} sections`, 'section')
  const checked = withBars(body, section, section.bars)
  return checked.ok ? ok({ ...body, sections: spliced(body.sections, at, 0, section) }) : checked
}

function removeSection(body: ChartBody, { sectionId }: Of<'removeSection'>): Edited {
  if (!sectionOf(body, sectionId)) return refuse('The chart has no such section any more', 'sectionId')
  return ok({
    ...body,
    sections: body.sections.filter(({ id }) => id !== sectionId),
    order: body.order.filter((id) => id !== sectionId)
  })
}

function moveSection(body: ChartBody, { sectionId, to }: Of<'moveSection'>): Edited {
  const section = sectionOf(body, sectionId)
  if (!section) return refuse('The chart has no such section any more', 'sectionId')
  return ok({
    ...body,
    sections: spliced(
      body.sections.filter(({ id }) => id !== sectionId),
      to,
      0,
      section
    )
  })
}

function apply(body: ChartBody, operation: ChartOperation): Edited {
  switch (operation.kind) {
    case 'setKey':
      return given({ ...body, key: operation.key }, checkKey(operation.key))
    case 'setMeter':
      // Bars written beat by beat may not fit the new meter.
      return checkChart({ ...body, meter: operation.meter })
    case 'setTempo':
      return given({ ...body, tempo: operation.tempo }, checkTempo(operation.tempo))
    case 'setCyclic':
      return ok({ ...body, cyclic: operation.cyclic })
    case 'setBar':
      return setBar(body, operation)
    case 'insertBar':
      return insertBar(body, operation)
    case 'removeBar':
      return removeBar(body, operation)
    case 'setBars':
      return inSection(body, operation.sectionId, (section) => withBars(body, section, operation.bars))
    case 'addSection':
      return addSection(body, operation)
    case 'renameSection':
      return inSection(body, operation.sectionId, (section) => ok({ ...section, name: operation.name }))
    case 'removeSection':
      return removeSection(body, operation)
    case 'moveSection':
      return moveSection(body, operation)
    case 'setOrder':
      return given({ ...body, order: operation.order }, checkOrder({ ...body, order: operation.order }))
    case 'replaceChart':
      return checkChart(operation.body)
  }
}

function invert(before: ChartBody, operation: ChartOperation): ChartOperation[] {
  if ('sectionId' in operation) return invertInSection(before, operation)
  switch (operation.kind) {
    case 'setKey':
      return [{ kind: 'setKey', key: before.key }]
    case 'setMeter':
      return [{ kind: 'setMeter', meter: before.meter }]
    case 'setTempo':
      return [{ kind: 'setTempo', tempo: before.tempo }]
    case 'setCyclic':
      return [{ kind: 'setCyclic', cyclic: before.cyclic }]
    case 'addSection':
      return [{ kind: 'removeSection', sectionId: operation.section.id }]
    case 'setOrder':
      return [{ kind: 'setOrder', order: before.order }]
    case 'replaceChart':
      return [{ kind: 'replaceChart', body: before }]
  }
}

function invertInSection(
  before: ChartBody,
  operation: Extract<ChartOperation, { sectionId: string }>
): ChartOperation[] {
  const { sectionId } = operation
  const section = sectionOf(before, sectionId)
  if (!section) return []
  const place = before.sections.indexOf(section)
  switch (operation.kind) {
    case 'setBar':
      return [{ ...operation, text: section.bars[operation.index] ?? '' }]
    case 'insertBar':
      return [{ kind: 'removeBar', sectionId, index: operation.index }]
    case 'removeBar':
      return [{ kind: 'insertBar', sectionId, index: operation.index, text: section.bars[operation.index] ?? '' }]
    case 'setBars':
      return [{ kind: 'setBars', sectionId, bars: section.bars }]
    case 'renameSection':
      return [{ kind: 'renameSection', sectionId, name: section.name }]
    case 'removeSection':
      return [
        { kind: 'addSection', section, at: place },
        ...(before.order.includes(sectionId) ? [{ kind: 'setOrder' as const, order: before.order }] : [])
      ]
    case 'moveSection':
      return [{ kind: 'moveSection', sectionId, to: place }]
  }
}

const barPart = (sectionId: string, index: number): string => `bar:${sectionId}:${index}`

// Bars from `first` on: an edit that shifts or replaces them conflicts with every edit of one of them, and with another shift.
function barsFrom(before: ChartBody, sectionId: string, first: number): string[] {
  const count = sectionOf(before, sectionId)?.bars.length ?? 0
  const bars = Array.from({ length: Math.max(0, count - first) }, (_, offset) => barPart(sectionId, first + offset))
  return [`bars:${sectionId}`, ...bars]
}

function parts(before: ChartBody, operation: ChartOperation): string[] {
  switch (operation.kind) {
    case 'setKey':
      return ['key']
    case 'setMeter':
      return ['meter']
    case 'setTempo':
      return ['tempo']
    case 'setCyclic':
      return ['cyclic']
    case 'setBar':
      return [barPart(operation.sectionId, operation.index)]
    case 'insertBar':
    case 'removeBar':
      return barsFrom(before, operation.sectionId, operation.index)
    case 'setBars':
      return barsFrom(before, operation.sectionId, 0)
    case 'renameSection':
      return [`name:${operation.sectionId}`]
    case 'addSection':
    case 'moveSection':
      return ['sections']
    case 'removeSection':
      return ['sections', 'order', `name:${operation.sectionId}`, ...barsFrom(before, operation.sectionId, 0)]
    case 'setOrder':
      return ['order']
    case 'replaceChart':
      return ['*']
  }
}

/** The chart of a tune. Bars stay as typed; an edit whose bar cannot be read is refused, naming bar and reason. */
export const chartDocument: DocumentKind<ChartBody, ChartOperation> = {
  name: 'chart',
  body: chartBodySchema,
  operation: chartOperationSchema,
  empty: { key: '', meter: '4/4', tempo: null, cyclic: true, sections: [], order: [] },
  apply,
  invert,
  parts
}
