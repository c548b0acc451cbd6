// How the player's clock stands to the capture's. Both run on the same machine's time but begin at moments of their own.
import { middleOf, type HeardPlace } from '@shared/practice/over-recording'
import type { Player } from '@client/transport/player'
import type { Sec } from '@shared/units'
import type { Capture } from './capture'

export interface ClockPairs {
  /** Reads both clocks and the place that is heard, now. */
  read(): void
  readonly heard: readonly HeardPlace[]
  /** What the player's clock shows when the capture's shows 0. */
  offsetSec(): Sec
}

export const createClockPairs = (player: Player, capture: Pick<Capture, 'heard'>): ClockPairs => {
  const heard: HeardPlace[] = []
  const offsets: Sec[] = []
  return {
    read: () => {
      const clockSec = player.clock()
      const captureSec = capture.heard()
      heard.push({ clockSec, placeSec: player.positionAt(clockSec) })
      // Before it plays its clock may stand.
      if (player.state === 'playing') offsets.push(clockSec - captureSec)
    },
    heard,
    offsetSec: () => middleOf(offsets)
  }
}
