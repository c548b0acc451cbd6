import { memo } from 'react'
import { ChordSymbol } from '@client/ui/chord-symbol'
import { chordRuns } from '@client/ui/chord-runs'
import { typesetChord, type ChordStyle } from '@shared/music/chord-typeset'
import { beatsPerBar } from '@shared/timing/meter'
import type { BarMap } from '@shared/timing/bar-map'
import type { BarIndex } from '@shared/units'
import type { BarMark } from './bar-marks'
import { Moving } from './moving'
import type { BarChord } from './timeline-types'
import type { ViewStore } from './view-store'

const sizePx = 17
const fewestBarPx = 40

interface SetChord extends BarChord {
  key: string
  x: number
}

/** The written chords. Where bars are narrow only changes are shown, and never one over another. */
export const ChordLane = memo(function ChordLane(props: {
  store: ViewStore
  marks: BarMark[]
  barMap: BarMap
  chordsOf: (bar: BarIndex) => readonly BarChord[]
  chordStyle?: ChordStyle
}) {
  return (
    <Moving store={props.store}>
      {fitting(props.marks, props.barMap, props.chordsOf).map(({ key, x, chord, faint }) => (
        <span key={key} className="absolute top-1" style={{ left: x + 5 }}>
          <ChordSymbol chord={chord} style={props.chordStyle} faint={faint} size={sizePx} />
        </span>
      ))}
    </Moving>
  )
})

const fitting = (
  marks: readonly BarMark[],
  barMap: BarMap,
  chordsOf: (bar: BarIndex) => readonly BarChord[]
): SetChord[] => {
  const kept: SetChord[] = []
  let freeFrom = -Infinity
  for (const { bar, x, width, hasNumber } of marks) {
    if (width < fewestBarPx && !hasNumber) continue
    for (const chord of chordsOf(bar)) {
      const at = x + ((chord.beat - 1) / beatsPerBar(barMap.meterAt(bar))) * width
      if (at < freeFrom || (chord.faint && width < fewestBarPx)) continue
      kept.push({ ...chord, key: `${bar}:${chord.beat}`, x: at })
      freeFrom = at + roughWidth(chord) + 6
    }
  }
  return kept
}

/** Measured on the shipped face: a sign is about six tenths of its size wide. */
const roughWidth = ({ chord }: BarChord): number =>
  chordRuns(typesetChord(chord)).reduce((sum, run) => sum + (run.text.length * 0.62 * run.scale + run.gap) * sizePx, 5)
