// Tapped or steady bars as one edit of the bar map, tried as a whole before anything is sent.
import type { OperationFault } from '@shared/documents/document'
import { applyAll } from '@shared/documents/merge'
import { ok, type Result } from '@shared/result'
import { barMapDocument } from '@shared/timing/bar-map-document'
import { layTaps } from '@shared/timing/bar-map-gestures'
import type { BarMapOperation } from '@shared/timing/bar-map-schema'
import { COMMON_METER, pulsesPerBar } from '@shared/timing/meter'
import { rational } from '@shared/timing/rational'
import { fitTaps, type TapFit, type TapMode } from '@shared/timing/taps'
import type { Anchor, BarMapBody, Meter, MeterMark, Position } from '@shared/timing/types'
import { ANCHOR_SEC } from '@shared/timing/validate-bar-map'
import type { Sec } from '@shared/units'
import type { TuneHint } from '@client/features/bar-maps/editor-props'

/** What becomes of bars already laid outside the taps. */
export type Rest = 'keep' | 'drop after' | 'drop all'

export interface TapPlanInput {
  body: BarMapBody
  tune: TuneHint | null
  durationSec: Sec
  taps: readonly Sec[]
  mode: TapMode
  rate: number
  lagSec: Sec
  start: Position
  rest: Rest
  newId: () => string
}

export interface BarPlan {
  operations: BarMapOperation[]
  /** The bar map as it will be. */
  body: BarMapBody
}
export interface TapPlan extends BarPlan {
  fit: TapFit
}

// One edit must fit into a request: past this the bar lines alone are kept, which hold the tempo of each bar.
const MOST_ANCHORS = 3000

const thinned = (anchors: Anchor[]): Anchor[] =>
  anchors.length <= MOST_ANCHORS
    ? anchors
    : anchors.filter(({ position: { beat } }, i) => beat.n === beat.d || i === 0 || i === anchors.length - 1)

/** The meters bars are counted in: the tune's while nothing is laid, then the take's own. */
export const metersFor = (body: BarMapBody, tune: TuneHint | null): MeterMark[] =>
  body.anchors.length === 0 && tune?.meter ? [{ bar: 1, meter: tune.meter }] : body.meters

const sameMeter = (a: Meter, b: Meter): boolean => a.upper === b.upper && a.lower === b.lower && a.pulse === b.pulse

/** What goes before the first bars of a take: the tune's meter, and the form from bar 1 on. */
const groundwork = (body: BarMapBody, tune: TuneHint | null): BarMapOperation[] => {
  if (body.anchors.length > 0 || !tune) return []
  const { meter, formLength } = tune
  const first = body.meters[0]
  const operations: BarMapOperation[] = []
  if (meter && !(body.meters.length === 1 && first && sameMeter(first.meter, meter)))
    operations.push({ kind: 'setMeter', bar: first?.bar ?? 1, meter })
  if (formLength > 0 && body.marks.length === 0)
    operations.push({ kind: 'setMark', mark: { bar: 1, formBar: 1, newPass: true } })
  return operations
}

const planned = (body: BarMapBody, operations: BarMapOperation[]): Result<BarPlan, OperationFault> => {
  const applied = applyAll(barMapDocument, body, operations)
  return applied.ok ? ok({ operations, body: applied.value.body }) : applied
}

const laid = (body: BarMapBody, anchors: Anchor[], rest: Rest, durationSec: Sec) => {
  const whole: BarMapOperation = {
    kind: 'replaceAnchors',
    fromSec: ANCHOR_SEC.min,
    toSec: ANCHOR_SEC.max,
    anchors
  }
  if (rest === 'drop all') return ok(whole)
  const last = Math.max(durationSec, body.anchors.at(-1)?.sec ?? 0)
  return layTaps(body, anchors, rest === 'drop after' ? last : null)
}

/** Taps of a hand as an edit; the fault is a sentence for who tapped. */
export const planTaps = (input: TapPlanInput): Result<TapPlan, OperationFault> => {
  const { body, tune, durationSec, taps, mode, rate, lagSec, start, rest, newId } = input
  const fit = fitTaps({ taps, mode, meters: metersFor(body, tune), rate, lagSec, startPosition: start, newId })
  if (!fit.ok) return fit
  const before = groundwork(body, tune)
  const ground = planned(body, before)
  if (!ground.ok) return ground
  const taken = laid(ground.value.body, thinned(fit.value.anchors), rest, durationSec)
  if (!taken.ok) return taken
  const plan = planned(body, [...before, taken.value])
  return plan.ok ? ok({ ...plan.value, fit: fit.value }) : plan
}

export interface SteadyInput {
  body: BarMapBody
  tune: TuneHint | null
  durationSec: Sec
  /** Felt beats a minute. */
  tempo: number
  barOneSec: Sec
  newId: () => string
}

/** Bars at one tempo from bar 1 to the end of the take, each line fixed so that it can be moved by itself. */
export const planSteadyBars = (input: SteadyInput): Result<BarPlan, OperationFault> => {
  const { body, tune, durationSec, tempo, barOneSec, newId } = input
  const meter = metersFor(body, tune)[0]?.meter ?? COMMON_METER
  const barSec = (pulsesPerBar(meter) * 60) / tempo
  const count = Math.max(2, Math.min(MOST_ANCHORS, Math.floor((durationSec - barOneSec) / barSec) + 1))
  const anchors = Array.from({ length: count }, (_, i) => ({
    id: newId(),
    sec: barOneSec + i * barSec,
    position: { bar: i + 1, beat: rational(1) }
  }))
  return planned(body, [
    ...groundwork(body, tune),
    { kind: 'replaceAnchors', fromSec: ANCHOR_SEC.min, toSec: ANCHOR_SEC.max, anchors }
  ])
}
