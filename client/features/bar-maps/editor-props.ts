import type { Meter, Span } from '@shared/timing/types'
import type { BarIndex, Sec } from '@shared/units'
import type { TransportControls } from '@client/transport/controls'
import type { Player } from '@client/transport/player'
import type { BarMapBody } from '@shared/timing/types'
import type { BarEdits } from '@client/features/bar-maps/use-bar-edits'
import type { LiveBarMap } from '@client/features/bar-maps/use-bar-map'

/** What the tune tells about bars that are not laid yet. */
export interface TuneHint {
  meter: Meter | null
  /** Bars of the played form; 0 while there is none. */
  formLength: number
  cyclic: boolean
  tempo: { min: number; max: number } | null
}

export interface BarEditorProps {
  document: LiveBarMap
  /** From `useBarEdits(document)`, shared with the timeline so that refused drags are told here. */
  edits: BarEdits
  /** Read for where the sound is. */
  player: Player
  /** What plays, seeks and slows: alone the player's, in a session the session's. */
  controls: TransportControls
  durationSec: Sec
  tune: TuneHint | null
  /** Taps begin at its start, lines are filled to its end. */
  selection: Span | null
  /** The bar whose line is being looked at, shared with the handles on the timeline. */
  bar: BarIndex | null
  onBar(bar: BarIndex): void
  /** How late this person taps; null until learned. */
  tapLagMs: number | null
  onTapLag(lagMs: number): void
  /** Bars to draw in place of the kept ones while tapped ones wait for an answer; null: the kept ones again. */
  onPreview(body: BarMapBody | null): void
  onClose(): void
}
