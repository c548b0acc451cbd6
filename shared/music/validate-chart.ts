// Whether a chart can be read as a whole: used on a chart that arrives in one piece and after every edit that touches all of it.
import type { OperationFault } from '@shared/documents/document'
import { err, ok, type Result } from '@shared/result'
import { readBar } from '@shared/music/chart'
import { chartLimits } from '@shared/music/chart-schema'
import { readKey } from '@shared/music/key'
import type { ChartBody, ChartSection } from '@shared/music/types'
import { readMeter } from '@shared/timing/meter'
import type { Meter } from '@shared/timing/types'

const fault = (message: string, path: (string | number)[]): { ok: false; error: OperationFault } =>
  err({ message, path })

export function checkKey(key: string): Result<void, OperationFault> {
  if (key === '') return ok(undefined)
  const read = readKey(key)
  return read.ok ? ok(undefined) : fault(read.error.message, ['key'])
}

export function checkMeter(meter: string): Result<Meter, OperationFault> {
  const read = readMeter(meter)
  return read ? ok(read) : fault(`“${meter}” is not a meter; write 4/4, 3/4, 6/8 …`, ['meter'])
}

export function checkTempo(tempo: ChartBody['tempo']): Result<void, OperationFault> {
  if (tempo && tempo.min > tempo.max) return fault('The slowest tempo is faster than the fastest', ['tempo'])
  return ok(undefined)
}

/** Bars of one section, named as the reader of the chart counts them: from 1 in their section. */
export function checkBars(
  section: ChartSection,
  meter: Meter,
  indexes: Iterable<number> = section.bars.keys()
): Result<void, OperationFault> {
  for (const index of indexes) {
    const bar = readBar(section.bars[index] ?? '', meter)
    if (!bar.ok) return fault(`Bar ${index + 1} of ${section.name}: ${bar.error.message}`, ['bars', index])
  }
  return ok(undefined)
}

export function checkOrder(body: ChartBody): Result<void, OperationFault> {
  const ids = new Set(body.sections.map(({ id }) => id))
  if (ids.size < body.sections.length) return fault('Two sections have the same id', ['sections'])
  const stray = body.order.findIndex((id) => !ids.has(id))
  return stray < 0 ? ok(undefined) : fault('The order names a section that the chart does not have', ['order', stray])
}

export function checkLength(sections: ChartSection[]): Result<void, OperationFault> {
  const length = sections.reduce((sum, { bars }) => sum + bars.reduce((some, bar) => some + bar.length, 0), 0)
  if (length <= chartLimits.text) return ok(undefined)
  return fault(`A chart holds at most ${chartLimits.text} characters in its bars`, ['sections'])
}

/** Key, meter, tempo, order and every bar of a chart. Call it on a chart that does not come through an operation. */
export function checkChart(body: ChartBody): Result<ChartBody, OperationFault> {
  const meter = checkMeter(body.meter)
  if (!meter.ok) return meter
  for (const checked of [checkKey(body.key), checkTempo(body.tempo), checkOrder(body), checkLength(body.sections)])
    if (!checked.ok) return checked
  for (const section of body.sections) {
    const bars = checkBars(section, meter.value)
    if (!bars.ok) return bars
  }
  return ok(body)
}
