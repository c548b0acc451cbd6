// The chart as it is laid out: a row a playing of a section, in the order played; then what is written but not played.
import { soundingBars, type SoundingBarChord } from '@shared/music/chart'
import { formOf } from '@shared/music/form'
import { readKey } from '@shared/music/key'
import { ordinal } from '@shared/music/ordinal'
import { INSTRUMENT_SEMITONES, transposeChord, transposition, type InstrumentPitch } from '@shared/music/transpose'
import type { ChartBody } from '@shared/music/types'
import { toNumber } from '@shared/timing/rational'
import type { Chord } from '@shared/music/chord'

export interface CellChord {
  /** From 1, in the meter's lower figure. */
  beat: number
  chord: Chord
  /** Goes on or comes back from an earlier bar. */
  faint: boolean
}

export interface ChartCell {
  key: string
  sectionId: string
  /** From 0 in its section. */
  index: number
  /** Through the played form; null where the section is not played. */
  formBar: number | null
  /** "Bar 3 of 2nd A". */
  name: string
  chords: CellChord[]
}

export interface ChartRow {
  key: string
  sectionId: string
  /** In the margin. */
  name: string
  played: boolean
  cells: ChartCell[]
}

/** Bars that stand in one line where there is room: a phrase. */
export const phraseBars = (count: number): 4 | 8 => (count > 4 && (count <= 8 || count % 8 === 0) ? 8 : 4)

export const chartRows = (body: ChartBody, pitch: InstrumentPitch = 'C'): ChartRow[] => {
  const key = readKey(body.key)
  const by = transposition(INSTRUMENT_SEMITONES[pitch], key.ok ? key.value.fifths : 0)
  const set = ({ beat, chord, carried }: SoundingBarChord): CellChord => ({
    beat: toNumber(beat),
    chord: transposeChord(chord, by),
    faint: carried
  })
  const form = formOf(body)
  const rows: ChartRow[] = body.order.flatMap((sectionId, at) => {
    const section = body.sections.find(({ id }) => id === sectionId)
    if (!section) return []
    const times = body.order.filter((id) => id === sectionId).length
    const time = body.order.slice(0, at + 1).filter((id) => id === sectionId).length
    const spoken = times > 1 ? `${ordinal(time)} ${section.name}` : section.name
    const cells = form.bars.flatMap((bar, i) =>
      bar.orderIndex === at
        ? [
            {
              key: `${at}:${bar.barInSection}`,
              sectionId,
              index: bar.barInSection - 1,
              formBar: bar.formBar,
              name: `Bar ${bar.barInSection} of ${spoken}`,
              chords: (form.sounding[i]?.chords ?? []).map(set)
            }
          ]
        : []
    )
    return [{ key: `played ${at}`, sectionId, name: section.name, played: true, cells }]
  })
  const unplayed = body.sections.filter(({ id }) => !body.order.includes(id))
  return [
    ...rows,
    ...unplayed.map((section) => ({
      key: section.id,
      sectionId: section.id,
      name: section.name,
      played: false,
      cells: soundingBars(section.bars, form.meter).map(({ chords }, index) => ({
        key: `${section.id}:${index}`,
        sectionId: section.id,
        index,
        formBar: null,
        name: `Bar ${index + 1} of ${section.name}`,
        chords: chords.map(set)
      }))
    }))
  ]
}
