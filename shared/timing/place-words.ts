// Places of a take in the words players use: "bar 19, the and of 3 · B section, 2nd chorus · over Gm7".
import type { BarMap } from '@shared/timing/bar-map'
import { roundToBeat, beatWords, type RoundedPlace } from '@shared/timing/beat-words'
import { pulsesPerBar } from '@shared/timing/meter'
import { createFormMap, type FormMap, type TakePart } from '@shared/timing/passes'
import { passWords, sectionAt, sectionWords, type SectionStart } from '@shared/timing/sections'
import { spokenTime, timeWords } from '@shared/timing/time-words'
import { rational } from '@shared/timing/rational'
import type { Meter, Rational, Span } from '@shared/timing/types'
import type { BarIndex, Sec } from '@shared/units'

/** What places are named after. Without a bar map they are times, without a form bars counted through the take. */
export interface PlaceSetting {
  barMap: BarMap | null
  form: FormMap | null
  /** Sections of the played form, rising by bar. */
  sections: readonly SectionStart[]
  /** The chart's chord as written at a bar of the form and a beat (from 1, lower figure); null where there is none. */
  chordAt?: (formBar: number, beat: Rational) => string | null
}

export interface PlaceWords {
  /** `bar 19, beat 3`, `bars 17 to 18`, `pick-up, beat 4`, `introduction, bar 3`, `at 1:23.4`. */
  place: string
  /** `B section, 2nd chorus`. */
  where: string | null
  /** `over Gm7`. */
  over: string | null
  /** All of them, with ` · ` between. */
  full: string
}

const NO_FORM = createFormMap({ marks: [], formLength: 0, cyclic: false })

/** Words for a moment. */
export const pointWords = (sec: Sec, setting: PlaceSetting): PlaceWords => {
  const { barMap } = setting
  if (!barMap) return joined(`at ${timeWords(sec)}`)
  const place = roundToBeat(barMap.positionAt(sec), barMap.meterAt)
  const part = partOf(place.bar, setting)
  return joined(`${barName(part)}, ${beatWords(place)}`, whereWords([part], setting), overWords([place], setting))
}

/** Words for a span, named by the bars and beats it covers; shorter than half a felt beat it is named as its start. */
export const spanWords = (span: Span, setting: PlaceSetting): PlaceWords => {
  const { barMap } = setting
  if (!(span.endSec > span.startSec)) return pointWords(span.startSec, setting)
  if (!barMap) return joined(`from ${timeWords(span.startSec)} to ${timeWords(span.endSec)}`)
  const start = roundToBeat(barMap.positionAt(span.startSec), barMap.meterAt)
  const end = roundToBeat(barMap.positionAt(span.endSec), barMap.meterAt)
  const shortest = 30 / barMap.tempoAt(span.startSec)
  if (span.endSec - span.startSec < shortest || isSame(start, end)) return pointWords(span.startSec, setting)
  const last = lastCovered(end, barMap)
  const parts = [partOf(start.bar, setting), partOf(last.bar, setting)] as const
  const place = isLine(start) && isLine(end) ? barsName(...parts, setting) : beatsName(start, last, parts, setting)
  return joined(place, whereWords(parts, setting), overWords(placesIn(start, last, barMap), setting))
}

/** `bar 41` or `introduction, bar 3`: the bar alone; null without a bar map. */
export const barWords = (sec: Sec, setting: PlaceSetting): string | null =>
  setting.barMap ? barName(partOf(setting.barMap.barAt(sec), setting)) : null

/** For a slider's aria-valuetext: `2 minutes 3 seconds, bar 41, C minor seventh` (chord words as spoken passed in). */
export const spokenPlace = (sec: Sec, setting: PlaceSetting, chordWords: string | null = null): string =>
  spokenTime(sec, barWords(sec, setting), chordWords)

const joined = (place: string, where: string | null = null, over: string | null = null): PlaceWords => ({
  place,
  where,
  over,
  full: [place, where, over].filter((part) => part !== null).join(' · ')
})

const partOf = (bar: BarIndex, { form }: PlaceSetting): TakePart => (form ?? NO_FORM).partOf(bar)

const barName = ({ kind, bar }: TakePart): string => {
  if (kind === 'pass' || kind === 'bars') return `bar ${bar}`
  if (kind !== 'pick-up') return `${kind}, bar ${bar}`
  return bar === 0 ? 'pick-up' : `${1 - bar} bars before bar 1`
}

const isSameRun = (a: TakePart, b: TakePart) => a.kind === b.kind && a.pass === b.pass

const barsName = (first: TakePart, last: TakePart, setting: PlaceSetting): string => {
  if (isSameRun(first, last) && first.bar === last.bar) return barName(first)
  if (isSameRun(first, last) && first.kind !== 'pick-up' && first.bar < last.bar) {
    const outside = first.kind === 'pass' || first.kind === 'bars' ? '' : `${first.kind}, `
    return `${outside}bars ${first.bar} to ${last.bar}`
  }
  return `${withPass(first, last, setting)} to ${withPass(last, first, setting)}`
}

/** A bar with its pass when the other end of the span is in another one. */
const withPass = (part: TakePart, other: TakePart, { form }: PlaceSetting): string => {
  const said = part.kind === 'pass' && part.pass !== null && other.pass !== part.pass
  return said ? `${barName(part)}, ${passWords(part.pass as number, form?.plan.cyclic ?? false)}` : barName(part)
}

const beatsName = (
  start: RoundedPlace,
  last: RoundedPlace,
  [first, end]: readonly [TakePart, TakePart],
  setting: PlaceSetting
): string => {
  const from = `${withPass(first, end, setting)}, ${beatWords(start)}`
  if (isSame(start, last)) return from
  if (start.bar !== last.bar) return `${from} to ${withPass(end, first, setting)}, ${beatWords(last)}`
  if (start.word === null && last.word === null) return `${barName(first)}, beats ${start.pulse} to ${last.pulse}`
  return `${from} to ${beatWords(last)}`
}

const whereWords = (parts: readonly TakePart[], { form, sections }: PlaceSetting): string | null => {
  const [first, last] = [parts[0], parts.at(-1)]
  if (!first || !last || first.kind !== 'pass' || last.kind !== 'pass') return null
  const [from, to] = [first, last].map((part) => {
    const section = sectionAt(sections, part.bar)
    return section ? sectionWords(section, sections) : null
  })
  const section = from && to && from !== to ? `${from} to ${to}` : (from ?? to ?? null)
  // Two passes are already named with their bars.
  const pass =
    first.pass !== null && first.pass === last.pass ? passWords(first.pass, form?.plan.cyclic ?? false) : null
  return [section, pass].filter((word) => word !== null).join(', ') || null
}

const overWords = (places: RoundedPlace[], setting: PlaceSetting): string | null => {
  const chords: string[] = []
  for (const { bar, pulse, meter, fraction } of places) {
    const formBar = setting.form?.formPlaceOf(bar)?.formBar ?? null
    const chord = formBar === null ? null : setting.chordAt?.(formBar, beatOf(pulse - 1 + fraction, meter))
    if (chord && chord !== chords.at(-1)) chords.push(chord)
  }
  if (chords.length === 0) return null
  if (chords.length > 3) return `over ${chords[0]} to ${chords.at(-1)}`
  return `over ${chords.length > 1 ? `${chords.slice(0, -1).join(', ')} and ${chords.at(-1)}` : chords[0]}`
}

// Every named subdivision is a multiple of a twelfth of the felt beat.
const beatOf = (pulses: number, meter: Meter): Rational => rational(Math.round(pulses * 12) * meter.pulse + 12, 12)

const isLine = ({ pulse, fraction }: RoundedPlace) => pulse === 1 && fraction === 0
const isSame = (a: RoundedPlace, b: RoundedPlace) => a.bar === b.bar && a.pulse === b.pulse && a.fraction === b.fraction

/** The last beat a span that ends at `end` covers: the one before a beat it ends on, else the place itself. */
const lastCovered = (end: RoundedPlace, { meterAt }: BarMap): RoundedPlace => {
  if (end.fraction !== 0) return end
  if (end.pulse > 1) return { ...end, pulse: end.pulse - 1 }
  const meter = meterAt(end.bar - 1)
  return { ...end, bar: end.bar - 1, meter, pulse: pulsesPerBar(meter) }
}

// Chords are looked up beat by beat in at most so many bars; the words name no more than the ends anyway.
const CHORD_BARS = 64

const placesIn = (start: RoundedPlace, last: RoundedPlace, { meterAt }: BarMap): RoundedPlace[] => {
  const places = [start]
  let { bar, pulse } = start
  while (bar < start.bar + CHORD_BARS && (bar < last.bar || (bar === last.bar && pulse < last.pulse))) {
    if (pulse < pulsesPerBar(meterAt(bar))) pulse += 1
    else [bar, pulse] = [bar + 1, 1]
    places.push({ bar, pulse, meter: meterAt(bar), fraction: 0, word: null })
  }
  return places
}
