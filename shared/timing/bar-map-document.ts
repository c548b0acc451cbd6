import type { DocumentKind, OperationFault } from '@shared/documents/document'
import { err, ok, type Result } from '@shared/result'
import { BarMapBodySchema, BarMapOperationSchema, type BarMapOperation } from '@shared/timing/bar-map-schema'
import { COMMON_METER } from '@shared/timing/meter'
import { negate } from '@shared/timing/rational'
import { changeMeter, insertBar, removeBar, scaleBeats, setBarOne, shiftBeats } from '@shared/timing/renumber'
import type { Anchor, BarMapBody, FormMark, Position } from '@shared/timing/types'
import { isMeter, validateBarMap } from '@shared/timing/validate-bar-map'

/** 4/4 and no place known yet. */
export const emptyBarMap: BarMapBody = { anchors: [], meters: [{ bar: 1, meter: COMMON_METER }], marks: [] }

/** The bar map of a take as an edited document: two people may move different bar lines at once, the same one they may not. */
export const barMapDocument: DocumentKind<BarMapBody, BarMapOperation> = {
  name: 'bar-map',
  body: BarMapBodySchema,
  operation: BarMapOperationSchema,
  empty: emptyBarMap,
  apply: (body, op) => applyOperation(body, op),
  invert: (before, op) => invertOperation(before, op),
  parts: (before, op) => touchedParts(before, op)
}

type Applied = Result<BarMapBody, OperationFault>

const fault = (message: string): Applied => err({ message })

const applyOperation = (body: BarMapBody, op: BarMapOperation): Applied => {
  const changed = changeBody(body, op)
  return changed.ok ? validateBarMap(changed.value) : changed
}

const changeBody = (body: BarMapBody, op: BarMapOperation): Applied => {
  switch (op.kind) {
    case 'setAnchor':
      return ok(withAnchors(body, [...others(body, op.anchor.id), op.anchor]))
    case 'moveAnchor': {
      const anchor = findAnchor(body, op.id)
      if (!anchor) return fault('This place is no longer fixed in the bar map.')
      return ok(withAnchors(body, [...others(body, op.id), { ...anchor, sec: op.sec }]))
    }
    case 'removeAnchor':
      if (!findAnchor(body, op.id)) return fault('This place is no longer fixed in the bar map.')
      return ok({ ...body, anchors: others(body, op.id) })
    case 'replaceAnchors':
      if (!op.anchors.every(isWithin(op))) return fault('New places lie outside the stretch they are for.')
      return ok(withAnchors(body, [...body.anchors.filter((anchor) => !isWithin(op)(anchor)), ...op.anchors]))
    case 'shiftBeats':
      return ok(shiftBeats(body, op.beats))
    case 'halve':
      return ok(scaleBeats(body, 0.5))
    case 'double':
      return ok(scaleBeats(body, 2))
    case 'setBarOne':
      return ok(setBarOne(body, op.position))
    case 'setMeter':
      if (!isMeter(op.meter)) return fault(`${op.meter.upper}/${op.meter.lower} is not a meter.`)
      return ok(changeMeter(body, op.bar, op.meter))
    case 'removeMeter':
      if (!body.meters.some((mark) => mark.bar === op.bar)) return fault(`The meter does not change at bar ${op.bar}.`)
      if (body.meters[0]?.bar === op.bar) return fault('The first meter can be changed, not removed.')
      return ok(changeMeter(body, op.bar, null))
    case 'setMark':
      return ok(withMarks(body, [...body.marks.filter((mark) => mark.bar !== op.mark.bar), op.mark]))
    case 'removeMark':
      if (!body.marks.some((mark) => mark.bar === op.bar)) return fault(`Bar ${op.bar} has no mark of the form.`)
      return ok({ ...body, marks: body.marks.filter((mark) => mark.bar !== op.bar) })
    case 'insertBar':
      return ok(insertBar(body, op.bar))
    case 'removeBar':
      return ok(removeBar(body, op.bar))
    case 'setAll':
      return ok(op.body)
  }
}

/** Tried first because it merges with what others do meanwhile; taken only if it restores the body exactly. */
const smallInverse = (before: BarMapBody, op: BarMapOperation): BarMapOperation[] | null => {
  switch (op.kind) {
    case 'setAnchor':
    case 'moveAnchor':
    case 'removeAnchor': {
      const id = op.kind === 'setAnchor' ? op.anchor.id : op.id
      const anchor = findAnchor(before, id)
      return [anchor ? { kind: 'setAnchor', anchor } : { kind: 'removeAnchor', id }]
    }
    case 'replaceAnchors':
      return [{ ...op, anchors: before.anchors.filter(isWithin(op)) }]
    case 'shiftBeats':
      return [{ kind: 'shiftBeats', beats: negate(op.beats) }]
    case 'halve':
      return [{ kind: 'double' }]
    case 'double':
      return [{ kind: 'halve' }]
    case 'setMark':
    case 'removeMark': {
      const bar = op.kind === 'setMark' ? op.mark.bar : op.bar
      const mark = before.marks.find((candidate) => candidate.bar === bar)
      return [mark ? { kind: 'setMark', mark } : { kind: 'removeMark', bar }]
    }
    case 'insertBar':
      return [{ kind: 'removeBar', bar: op.bar }]
    case 'removeBar':
      return [{ kind: 'insertBar', bar: op.bar }]
    default:
      return null
  }
}

const invertOperation = (before: BarMapBody, op: BarMapOperation): BarMapOperation[] => {
  const after = applyOperation(before, op)
  if (!after.ok || isSameBody(after.value, before)) return []
  const small = smallInverse(before, op)
  const back = small?.reduce<Applied>((body, step) => (body.ok ? applyOperation(body.value, step) : body), after)
  return small && back?.ok && isSameBody(back.value, before) ? small : [{ kind: 'setAll', body: before }]
}

const touchedParts = (before: BarMapBody, op: BarMapOperation): string[] => {
  switch (op.kind) {
    case 'setAnchor':
    case 'moveAnchor':
    case 'removeAnchor': {
      const id = op.kind === 'setAnchor' ? op.anchor.id : op.id
      // The place too, so that two people who fix one bar line under two ids meet.
      const places = [findAnchor(before, id), op.kind === 'setAnchor' ? op.anchor : null]
      const names = places.flatMap((anchor) => (anchor ? [`place:${placeName(anchor.position)}`] : []))
      return [...new Set([`anchor:${id}`, ...names])]
    }
    case 'setMark':
      return [`mark:${op.mark.bar}`]
    case 'removeMark':
      return [`mark:${op.bar}`]
    default:
      return ['*']
  }
}

const findAnchor = (body: BarMapBody, id: string): Anchor | undefined => body.anchors.find((anchor) => anchor.id === id)
const others = (body: BarMapBody, id: string): Anchor[] => body.anchors.filter((anchor) => anchor.id !== id)
const isWithin =
  ({ fromSec, toSec }: { fromSec: number; toSec: number }) =>
  ({ sec }: Anchor) =>
    sec >= fromSec && sec <= toSec

const withAnchors = (body: BarMapBody, anchors: Anchor[]): BarMapBody => ({
  ...body,
  anchors: [...anchors].sort((a, b) => a.sec - b.sec)
})
const withMarks = (body: BarMapBody, marks: FormMark[]): BarMapBody => ({
  ...body,
  marks: [...marks].sort((a, b) => a.bar - b.bar)
})

const placeName = ({ bar, beat }: Position): string => `${bar}:${beat.n}/${beat.d}`

/** Same anchors, meters and marks in the same order, whatever the order of the keys. */
const isSameBody = (a: BarMapBody, b: BarMapBody): boolean => fingerprint(a) === fingerprint(b)
const fingerprint = ({ anchors, meters, marks }: BarMapBody): string =>
  JSON.stringify([
    anchors.map(({ id, sec, position }) => [id, sec, placeName(position)]),
    meters.map(({ bar, meter }) => [bar, meter.upper, meter.lower, meter.pulse]),
    marks.map(({ bar, formBar, newPass }) => [bar, formBar, newPass])
  ])
