// Where on the desk, as it stands in an address: bars through the take or within a pass of the form, or seconds where
// there are no bars; a comment, a speed and whether it loops go along.
import type { BarMap } from '@shared/timing/bar-map'
import type { FormMap } from '@shared/timing/passes'
import type { Span } from '@shared/timing/types'
import type { BarIndex, Sec } from '@shared/units'

export type PlaceWhere =
  | { kind: 'bars'; pass: number | null; firstBar: BarIndex; lastBar: BarIndex }
  | { kind: 'at'; startSec: Sec; endSec: Sec }

export interface PlaceAddress {
  where: PlaceWhere | null
  comment: string | null
  /** Percent. */
  speed: number | null
  loop: boolean
}

export interface PlaceGround {
  barMap: BarMap | null
  form: FormMap | null
  durationSec: Sec
}

export const noAddress: PlaceAddress = { where: null, comment: null, speed: null, loop: false }

const ownKeys = ['bars', 'pass', 'at', 'comment', 'speed', 'loop']

/** Bars as people count them; the pick-up is 0 and below, so a number may have its own minus. */
const barsPattern = /^(-?\d{1,5})(?:-(-?\d{1,5}))?$/
const secPattern = /^(\d{1,6}(?:\.\d{1,6})?)(?:-(\d{1,6}(?:\.\d{1,6})?))?$/
const commentPattern = /^[0-9a-f-]{36}$/i

/** Reads what can be read and passes over the rest: an address may have been typed by hand. */
export const readAddress = (query: URLSearchParams): PlaceAddress => {
  const speed = Number(query.get('speed') ?? NaN)
  const comment = query.get('comment') ?? ''
  return {
    where: readBars(query) ?? readSeconds(query),
    comment: commentPattern.test(comment) ? comment : null,
    speed: speed >= 20 && speed <= 150 ? Math.round(speed) : null,
    loop: query.get('loop') === '1'
  }
}

const readBars = (query: URLSearchParams): PlaceWhere | null => {
  const match = barsPattern.exec(query.get('bars') ?? '')
  if (!match) return null
  const [first, last] = [Number(match[1]), Number(match[2] ?? match[1])]
  const pass = /^\d{1,4}$/.test(query.get('pass') ?? '') ? Number(query.get('pass')) : null
  return {
    kind: 'bars',
    pass: pass && pass > 0 ? pass : null,
    firstBar: Math.min(first, last),
    lastBar: Math.max(first, last)
  }
}

const readSeconds = (query: URLSearchParams): PlaceWhere | null => {
  const match = secPattern.exec(query.get('at') ?? '')
  if (!match) return null
  const [start, end] = [Number(match[1]), Number(match[2] ?? match[1])]
  return { kind: 'at', startSec: Math.min(start, end), endSec: Math.max(start, end) }
}

const secText = (sec: Sec): string => String(Math.round(sec * 1000) / 1000)
const pair = (first: string, last: string): string => (first === last ? first : `${first}-${last}`)

/** The query with the place put in; whatever else stands in it (`session`) stays. */
export const writeAddress = (
  { where, comment, speed, loop }: PlaceAddress,
  onto: URLSearchParams = new URLSearchParams()
): URLSearchParams => {
  const query = new URLSearchParams([...onto].filter(([key]) => !ownKeys.includes(key)))
  if (where?.kind === 'bars') {
    if (where.pass !== null) query.set('pass', String(where.pass))
    query.set('bars', pair(String(where.firstBar), String(where.lastBar)))
  }
  if (where?.kind === 'at') query.set('at', pair(secText(where.startSec), secText(where.endSec)))
  if (comment) query.set('comment', comment)
  if (speed !== null && speed !== 100) query.set('speed', String(speed))
  if (loop) query.set('loop', '1')
  return query
}

/** The seconds of a place in this take; null when the take has no such bars. */
export const spanOfWhere = (where: PlaceWhere, { barMap, form, durationSec }: PlaceGround): Span | null => {
  if (where.kind === 'at') {
    const span = { startSec: Math.min(where.startSec, durationSec), endSec: Math.min(where.endSec, durationSec) }
    return span.startSec < durationSec ? span : null
  }
  if (!barMap) return null
  const { pass } = where
  const inTake = (bar: BarIndex) => (pass === null ? bar : (form?.barOf(pass, bar) ?? null))
  const [first, last] = [inTake(where.firstBar), inTake(where.lastBar)]
  if (first === null || last === null) return null
  const span = barMap.barsSpan(first, last)
  const held = { startSec: Math.max(0, span.startSec), endSec: Math.min(durationSec, span.endSec) }
  return held.endSec > held.startSec ? held : null
}

/** Nearer than this an edge is on the bar line. */
const sameSec = 1e-3

/** How a span is best named in an address: by whole bars of one pass, by bars of the take, otherwise by seconds. */
export const whereOfSpan = (span: Span, { barMap, form, durationSec }: PlaceGround): PlaceWhere => {
  const free: PlaceWhere = { kind: 'at', startSec: span.startSec, endSec: span.endSec }
  if (!barMap || !(span.endSec > span.startSec)) return free
  const inner = { startSec: span.startSec + sameSec, endSec: span.endSec - sameSec }
  const bars = inner.endSec > inner.startSec ? barMap.barsIn(inner) : []
  const [first, last] = [bars[0], bars.at(-1)]
  if (first === undefined || last === undefined) return free
  const whole = barMap.barsSpan(first, last)
  const isWhole =
    Math.abs(Math.max(0, whole.startSec) - span.startSec) <= sameSec &&
    Math.abs(Math.min(durationSec, whole.endSec) - span.endSec) <= sameSec
  if (!isWhole) return free
  return inOnePass(first, last, form) ?? { kind: 'bars', pass: null, firstBar: first, lastBar: last }
}

/** Named within the form where that leads back to the same bars (a take may repeat bars of a pass). */
const inOnePass = (first: BarIndex, last: BarIndex, form: FormMap | null): PlaceWhere | null => {
  const [from, to] = [form?.formPlaceOf(first), form?.formPlaceOf(last)]
  if (!form || !from || !to || from.formBar === null || to.formBar === null) return null
  const leadsBack =
    from.pass === to.pass && form.barOf(from.pass, from.formBar) === first && form.barOf(to.pass, to.formBar) === last
  if (!leadsBack || to.formBar < from.formBar) return null
  return { kind: 'bars', pass: from.pass, firstBar: from.formBar, lastBar: to.formBar }
}
