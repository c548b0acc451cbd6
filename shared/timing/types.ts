// Shapes of the bar map document. The reckoning lives in bar-map.ts, the edits in bar-map-document.ts.
import type { BarIndex, Sec } from '@shared/units'

/** An exact fraction, d > 0. */
export interface Rational {
  n: number
  d: number
}

/** A place: bar counted through the take (first full bar 1, pick-up 0 or less); beat from 1 in units of the meter's lower figure. */
export interface Position {
  bar: BarIndex
  beat: Rational
}

/** `upper/lower` as written; `pulse` is the felt beat in units of the lower figure (6/8: 3, 4/4: 1). */
export interface Meter {
  upper: number
  lower: number
  pulse: number
}

/** A moment known to be a place. Between two anchors time runs straight; before the first and after the last it goes on at their tempo. */
export interface Anchor {
  id: string
  sec: Sec
  position: Position
}

/** From this bar on the meter is this one. */
export interface MeterMark {
  bar: BarIndex
  meter: Meter
}

/**
 * From this bar of the take on, we are at bar `formBar` (from 1) of the played form, counting up from there.
 * `newPass` opens another time through; without it the pass goes on (bars added, dropped or repeated).
 * `formBar: null`: outside the form (free introduction, ending).
 */
export interface FormMark {
  bar: BarIndex
  formBar: number | null
  newPass: boolean
}

/** Body of the bar map document. Anchors strictly rise in time and in place; marks strictly rise by bar. */
export interface BarMapBody {
  anchors: Anchor[]
  meters: MeterMark[]
  marks: FormMark[]
}

/** A span of a take in seconds; `endSec >= startSec`. A point has both alike. */
export interface Span {
  startSec: Sec
  endSec: Sec
}
