// What the timeline is given to draw. It knows takes, bars and spans, not where they came from.
import type { Chord } from '@shared/music/chord'
import type { Span } from '@shared/timing/types'
import type { BarIndex, Sec } from '@shared/units'

/** A chord of a bar; `beat` from 1 in the meter's lower figure. Faint: it only repeats the one before. */
export interface BarChord {
  beat: number
  chord: Chord
  faint: boolean
}

export interface SectionMark {
  bar: BarIndex
  name: string
}

export interface CommentSpan {
  id: string
  span: Span
  /** The small letter that also stands in the margin. */
  letter: string
  /** Read out and shown on hover: "question by Mara, bars 17 to 18". */
  label: string
  isOpen: boolean
}

/** A plumb line: one's own place, or where the session is while one has stepped away. */
export interface LineSource {
  kind: 'own' | 'session'
  positionSec(): Sec
  /** The name it hangs from. */
  label?: string
}
