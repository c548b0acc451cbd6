import type { OperationFault } from '@shared/documents/document'
import { err, ok, type Result } from '@shared/result'
import { createBarGrid } from '@shared/timing/bar-grid'
import { LOWER_FIGURES, MAX_UPPER } from '@shared/timing/meter'
import { isReduced } from '@shared/timing/rational'
import { timeWords } from '@shared/timing/time-words'
import type { Anchor, BarMapBody, Meter, Rational } from '@shared/timing/types'

/** An hour tapped on every beat at 300 beats a minute fits. */
export const MAX_ANCHORS = 20_000
export const MAX_METERS = 500
export const MAX_MARKS = 2000
/** Bars are counted from -MAX_BAR to MAX_BAR. */
export const MAX_BAR = 100_000
/** Anchors lie from a minute before the take (a bar line before the first sound) to a day into it. */
export const ANCHOR_SEC = { min: -60, max: 86_400 } as const
/** Two anchors nearer than this are one. */
export const MIN_ANCHOR_GAP_SEC = 0.001
/** Felt beats a minute between two anchors: a long hold is slow, a slip of the hand may be fast, beyond that a place is wrong. */
export const TEMPO_BOUNDS = { min: 0.5, max: 5000 } as const
/** Largest denominator of a beat: leaves room to halve and to shift by triplets without leaving safe integers. */
export const MAX_DENOMINATOR = 2 ** 45

/**
 * Whether a body can be reckoned with: anchors strictly rise in time and in place, each place is inside its bar and reduced,
 * ids are unique, meters and marks strictly rise by bar. The error is a sentence for the person who edits, with the path.
 */
export const validateBarMap = (body: BarMapBody): Result<BarMapBody, OperationFault> => {
  const fault = sizeFault(body) ?? meterFault(body) ?? markFault(body) ?? anchorFault(body)
  return fault ? err(fault) : ok(body)
}

export const isSoundBarMap = (body: BarMapBody): boolean => validateBarMap(body).ok

const sizeFault = ({ anchors, meters, marks }: BarMapBody): OperationFault | null => {
  if (anchors.length > MAX_ANCHORS)
    return { message: `A bar map holds at most ${MAX_ANCHORS} fixed places.`, path: ['anchors'] }
  if (meters.length > MAX_METERS)
    return { message: `A bar map holds at most ${MAX_METERS} meter changes.`, path: ['meters'] }
  if (marks.length > MAX_MARKS)
    return { message: `A bar map holds at most ${MAX_MARKS} marks of the form.`, path: ['marks'] }
  return null
}

/** Upper figure 1-64, lower a power of two up to 32, and a felt beat that goes evenly into the bar. */
export const isMeter = ({ upper, lower, pulse }: Meter): boolean =>
  Number.isInteger(upper) &&
  upper >= 1 &&
  upper <= MAX_UPPER &&
  LOWER_FIGURES.some((figure) => figure === lower) &&
  Number.isInteger(pulse) &&
  pulse >= 1 &&
  upper % pulse === 0

const isBar = (bar: number): boolean => Number.isInteger(bar) && Math.abs(bar) <= MAX_BAR

const meterFault = ({ meters }: BarMapBody): OperationFault | null => {
  for (const [i, { bar, meter }] of meters.entries()) {
    const path = ['meters', i]
    if (!isBar(bar)) return { message: 'A meter change stands at a whole bar.', path }
    if (!isMeter(meter)) return { message: `${meter.upper}/${meter.lower} is not a meter.`, path }
    if (i > 0 && bar <= (meters[i - 1]?.bar ?? bar)) return { message: `Bar ${bar} has two meters.`, path }
  }
  return null
}

const markFault = ({ marks }: BarMapBody): OperationFault | null => {
  for (const [i, { bar, formBar }] of marks.entries()) {
    const path = ['marks', i]
    if (!isBar(bar)) return { message: 'A mark of the form stands at a whole bar.', path }
    if (formBar !== null && !(isBar(formBar) && formBar >= 1)) {
      return { message: 'Bars of the form are counted from 1.', path }
    }
    if (i > 0 && bar <= (marks[i - 1]?.bar ?? bar)) return { message: `Bar ${bar} is marked twice.`, path }
  }
  return null
}

const anchorFault = ({ anchors, meters }: BarMapBody): OperationFault | null => {
  const grid = createBarGrid(meters)
  const ids = new Set<string>()
  let before: { anchor: Anchor; wholeNotes: number } | null = null
  for (const [i, anchor] of anchors.entries()) {
    const { id, sec, position } = anchor
    const path = ['anchors', i]
    if (ids.has(id)) return { message: 'Two fixed places have the same id.', path }
    ids.add(id)
    if (!(sec >= ANCHOR_SEC.min && sec <= ANCHOR_SEC.max))
      return { message: 'A fixed place lies outside any take.', path }
    if (!isBar(position.bar) || !isFraction(position.beat))
      return { message: 'A fixed place has no bar and beat.', path }
    const { n, d } = position.beat
    if (n >= (grid.meterAt(position.bar).upper + 1) * d || !isReduced(position.beat)) {
      return { message: `Bar ${position.bar} has no such beat in its meter.`, path }
    }
    const wholeNotes = grid.wholeNotesAt(position)
    if (before) {
      const { lower, pulse } = grid.meterAt(before.anchor.position.bar)
      const fault = stepFault(before.anchor, anchor, ((wholeNotes - before.wholeNotes) * lower) / pulse)
      if (fault) return { message: fault, path }
    }
    before = { anchor, wholeNotes }
  }
  return null
}

const stepFault = (before: Anchor, after: Anchor, pulses: number): string | null => {
  const here = () => timeWords(before.sec)
  const there = () => timeWords(after.sec)
  if (after.sec - before.sec < MIN_ANCHOR_GAP_SEC) {
    return `Bar ${after.position.bar} at ${there()} is not after bar ${before.position.bar} at ${here()}.`
  }
  if (!(pulses > 0)) {
    return `The sound at ${there()} comes after ${here()}, so it cannot be bar ${after.position.bar} after bar ${before.position.bar}.`
  }
  const tempo = (60 * pulses) / (after.sec - before.sec)
  if (tempo < TEMPO_BOUNDS.min || tempo > TEMPO_BOUNDS.max) {
    const figure = tempo < 1 ? 'less than one beat' : `${Math.round(tempo)} beats`
    return `From ${here()} to ${there()} the tempo would be ${figure} a minute.`
  }
  return null
}

const isFraction = ({ n, d }: Rational): boolean =>
  Number.isSafeInteger(n) && Number.isInteger(d) && d >= 1 && d <= MAX_DENOMINATOR && n >= d
