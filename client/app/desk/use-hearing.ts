// Who holds the sound at this desk: the person alone, or the room they listen in together.
import { useMemo, type ReactNode } from 'react'
import type { LineSource } from '@client/timeline/timeline-types'
import { soloControls, type TransportControls } from '@client/transport/controls'
import type { Player } from '@client/transport/player'

export interface Hearing {
  /** All that the desk does to the sound goes through these. */
  controls: TransportControls
  /** Plumb lines, when there are more than one's own. */
  lines?: readonly LineSource[]
  /** The name the line hangs from. */
  leaderName?: string
  /** Right end of the bar at the top. */
  header?: ReactNode
  /** On top of the margin's People. */
  people?: ReactNode
  /** In the transport, beside the speed. */
  transport?: ReactNode
}

export const useHearing = (player: Player): Hearing => useMemo(() => ({ controls: soloControls(player) }), [player])
