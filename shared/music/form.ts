// The played form: the written sections laid out in the order they are played, and the chord at any place of it.
import { chordInBar, soundingBars, type SoundingBar, type SoundingBarChord } from '@shared/music/chart'
import { ordinal } from '@shared/music/ordinal'
import type { ChartBody } from '@shared/music/types'
import { COMMON_METER, readMeter } from '@shared/timing/meter'
import type { Meter, Rational } from '@shared/timing/types'

/** One bar of the played form. */
export interface FormBar {
  sectionId: string
  sectionName: string
  /** Which playing of this section in the form, from 1: the 2nd A. */
  sectionOccurrence: number
  /** How often the section is played in the form. */
  sectionOccurrences: number
  /** From 1. */
  barInSection: number
  /** From 1 through the played form. */
  formBar: number
  /** Place in the played order, from 0: one row of a chart for each. */
  orderIndex: number
  /** As typed. */
  text: string
}

/** The played form with what sounds in it; bars and `sounding` run alike. */
export interface Form {
  cyclic: boolean
  meter: Meter
  bars: FormBar[]
  sounding: SoundingBar[]
}

/** Bars of the played form, in order. Ids in the order that name no section are passed over. */
export function formBars(body: ChartBody): FormBar[] {
  const sections = new Map(body.sections.map((section) => [section.id, section]))
  const times = (id: string, until = body.order.length) =>
    body.order.slice(0, until).filter((other) => other === id).length
  const bars: FormBar[] = []
  for (const [orderIndex, id] of body.order.entries()) {
    const section = sections.get(id)
    for (const [index, text] of (section?.bars ?? []).entries())
      bars.push({
        sectionId: id,
        sectionName: section?.name ?? '',
        sectionOccurrence: times(id, orderIndex) + 1,
        sectionOccurrences: times(id),
        barInSection: index + 1,
        formBar: bars.length + 1,
        orderIndex,
        text
      })
  }
  return bars
}

/** Bars in one time through the form; 0 while there is none. */
export function formLength(body: ChartBody): number {
  const lengths = new Map(body.sections.map(({ id, bars }) => [id, bars.length]))
  return body.order.reduce((sum, id) => sum + (lengths.get(id) ?? 0), 0)
}

/** Lays the chart out once, for everything that asks for chords by place. A meter that cannot be read counts as 4/4. */
export function formOf(body: ChartBody): Form {
  const bars = formBars(body)
  const meter = readMeter(body.meter) ?? COMMON_METER
  const texts = bars.map(({ text }) => text)
  return { cyclic: body.cyclic, meter, bars, sounding: soundingBars(texts, meter) }
}

/** The chord that sounds at a place of the form (both from 1); null outside it and before the first written chord. */
export function chordAt(form: Form, formBar: number, beat: Rational): SoundingBarChord | null {
  const bar = form.sounding[formBar - 1]
  return bar ? chordInBar(bar, beat) : null
}

/** `A`, or `2nd A` where the section is played more than once. */
export const sectionWords = (bar: FormBar): string =>
  bar.sectionOccurrences > 1 ? `${ordinal(bar.sectionOccurrence)} ${bar.sectionName}` : bar.sectionName
