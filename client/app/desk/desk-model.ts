// What the desk shows of a take, derived from its bar map and its tune's chart each time either changes. Pure.
import type { BarComments } from '@client/timeline/form-strip'
import type { BarChord, SectionMark } from '@client/timeline/timeline-types'
import { chordText, type ChordStyle } from '@shared/music/chord-typeset'
import { chordWords } from '@shared/music/chord-words'
import { chordAt, formLength, formOf, type Form } from '@shared/music/form'
import type { ChartBody } from '@shared/music/types'
import { createBarMap, type BarMap } from '@shared/timing/bar-map'
import { formRows, type FormRow } from '@shared/timing/form-rows'
import { createFormMap, type FormMap } from '@shared/timing/passes'
import { barWords, spanWords, spokenPlace, type PlaceSetting, type PlaceWords } from '@shared/timing/place-words'
import { passWords, sectionAt, sectionStarts, sectionWords, type SectionStart } from '@shared/timing/sections'
import { timeWords } from '@shared/timing/time-words'
import type { BarMapBody, Span } from '@shared/timing/types'
import type { BarIndex, Sec } from '@shared/units'

export interface DeskModelInput {
  durationSec: Sec
  bars: BarMapBody | null
  chart: ChartBody | null
  /** How the reader likes chords written. */
  style?: ChordStyle
}

/** A bar as the text equivalent of the lanes says it. */
export interface BarRow {
  bar: BarIndex
  name: string
  time: string
  section: string
  chords: string
}

export interface DeskModel {
  durationSec: Sec
  /** Null until bars have been laid. */
  barMap: BarMap | null
  /** Null without bars or without a chart that has any. */
  form: FormMap | null
  sections: readonly SectionStart[]
  isCyclic: boolean
  rows: readonly FormRow[]
  sectionMarks: readonly SectionMark[]
  hasChords: boolean
  /** The number on the ruler; empty in introductions and endings, which are not counted. */
  barLabel(bar: BarIndex): string
  barName(bar: BarIndex): string
  chordsOf(bar: BarIndex): readonly BarChord[]
  placeOf(span: Span): PlaceWords
  valueText(sec: Sec): string
  /** All bars of the take in order. */
  barRows(): BarRow[]
}

export const deskModel = ({ durationSec, bars, chart, style }: DeskModelInput): DeskModel => {
  const barMap = bars ? createBarMap(bars) : null
  const length = chart ? formLength(chart) : 0
  const layout: Form | null = chart && length > 0 ? formOf(chart) : null
  const isCyclic = layout?.cyclic ?? false
  const sections = layout ? sectionStarts(layout.bars) : []
  const plan = { marks: bars?.marks ?? [], formLength: length, cyclic: isCyclic }
  const map = barMap ? createFormMap(plan) : null
  const form = length > 0 ? map : null
  const range = barMap?.barRange(durationSec) ?? null
  const setting: PlaceSetting = {
    barMap,
    form,
    sections,
    chordAt: (formBar, beat) => {
      const found = layout && chordAt(layout, formBar, beat)
      return found ? chordText(found.chord, style) : null
    }
  }

  const soundingIn = (bar: BarIndex) => {
    const formBar = form?.formPlaceOf(bar)?.formBar ?? null
    return formBar === null ? [] : (layout?.sounding[formBar - 1]?.chords ?? [])
  }
  const barName = (bar: BarIndex): string => {
    const part = map?.partOf(bar)
    const name = barMap ? barWords(barMap.barSec(bar), setting) : null
    const pass = part?.kind === 'pass' && part.pass !== null ? passWords(part.pass, isCyclic) : null
    return [name ?? `bar ${bar}`, pass].filter(Boolean).join(', ')
  }
  const chordWordsAt = (sec: Sec): string | null => {
    const position = barMap?.positionAt(sec)
    const formBar = position ? (form?.formPlaceOf(position.bar)?.formBar ?? null) : null
    const found = layout && position && formBar !== null ? chordAt(layout, formBar, position.beat) : null
    return found ? chordWords(found.chord) : null
  }
  const eachBar = (): BarIndex[] =>
    range ? Array.from({ length: range.lastBar - range.firstBar + 1 }, (_, i) => range.firstBar + i) : []
  const sectionOf = (bar: BarIndex): SectionStart | null => {
    const formBar = form?.formPlaceOf(bar)?.formBar ?? null
    return formBar === null ? null : sectionAt(sections, formBar)
  }

  return {
    durationSec,
    barMap,
    form,
    sections,
    isCyclic,
    rows: range ? formRows({ ...plan, sections, ...range }) : [],
    sectionMarks: eachBar().flatMap((bar) => {
      const section = sectionOf(bar)
      const isStart = section !== null && form?.formPlaceOf(bar)?.formBar === section.formBar
      return isStart && section.name.trim() ? [{ bar, name: section.name }] : []
    }),
    hasChords: layout?.sounding.some(({ chords }) => chords.length > 0) ?? false,
    barLabel: (bar) => {
      const part = map?.partOf(bar)
      return part && part.kind !== 'pass' && part.kind !== 'bars' ? '' : String(part?.bar ?? bar)
    },
    barName,
    chordsOf: (bar) =>
      soundingIn(bar).map(({ beat, chord, carried }) => ({ beat: beat.n / beat.d, chord, faint: carried })),
    placeOf: (span) => spanWords(span, setting),
    valueText: (sec) => spokenPlace(sec, setting, chordWordsAt(sec)),
    barRows: () =>
      eachBar().map((bar) => {
        const section = sectionOf(bar)
        return {
          bar,
          name: barName(bar),
          time: timeWords(Math.max(0, barMap?.barSec(bar) ?? 0)),
          section: section ? (sectionWords(section, sections) ?? '') : '',
          chords: soundingIn(bar)
            .map(({ chord }) => chordText(chord, style))
            .join(', ')
        }
      })
  }
}

interface Said {
  startSec: Sec
  isOpen: boolean
}

/** How many comments begin in each bar. */
export const commentsByBar = (barMap: BarMap | null, comments: readonly Said[]): ReadonlyMap<BarIndex, BarComments> => {
  const counts = new Map<BarIndex, BarComments>()
  if (!barMap) return counts
  for (const { startSec, isOpen } of comments) {
    const bar = barMap.barAt(startSec)
    const { open, settled } = counts.get(bar) ?? { open: 0, settled: 0 }
    counts.set(bar, { open: open + (isOpen ? 1 : 0), settled: settled + (isOpen ? 0 : 1) })
  }
  return counts
}
