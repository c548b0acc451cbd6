// Taps of one run: when the hand fell, in seconds of the take.
import { useRef, useState } from 'react'
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'
import type { TransportControls } from '@client/transport/controls'
import type { Player } from '@client/transport/player'

export type TapPhase = 'ready' | 'tapping' | 'looking'

export interface Tapping {
  phase: TapPhase
  taps: readonly Sec[]
  /** Speed the taps were made at. */
  rate: number
  start(rate: number): void
  /** `ageSec`: how long ago the hand fell, where that is known. */
  tap(ageSec?: Sec): void
  takeBack(): void
  /** Ends the run; the taps stay to be looked at. */
  stop(): void
  /** Back to the beginning, without taps. */
  reset(): void
}

interface Deps {
  player: Player
  controls: TransportControls
  /** Where the run begins; null: where the playhead is. */
  from: Span | null
}

export const useTapping = ({ player, controls, from }: Deps): Tapping => {
  const [phase, setPhase] = useState<TapPhase>('ready')
  const [taps, setTaps] = useState<readonly Sec[]>([])
  const [rate, setRate] = useState(1)
  const before = useRef<{ rate: number; loop: Span | null } | null>(null)

  const restore = (): void => {
    controls.pause()
    if (before.current) {
      controls.setRate(before.current.rate)
      if (before.current.loop) controls.setLoop(before.current.loop)
    }
    before.current = null
  }
  return {
    phase,
    taps,
    rate,
    start: (speed) => {
      before.current = { rate: player.rate, loop: player.loop?.span ?? null }
      setTaps([])
      setRate(speed)
      setPhase('tapping')
      // In a loop the same sound would be tapped twice.
      if (player.loop) controls.setLoop(null)
      controls.setRate(speed)
      if (from) controls.seek(from.startSec)
      controls.play()
    },
    tap: (ageSec = 0) => {
      const sec = player.heardPosition - ageSec * player.rate
      // After going back the new taps stand for the old ones from there on.
      setTaps((earlier) => [...earlier.filter((tap) => tap < sec), sec])
    },
    takeBack: () => setTaps((earlier) => earlier.slice(0, -1)),
    stop: () => {
      restore()
      setPhase('looking')
    },
    reset: () => {
      if (before.current) restore()
      setTaps([])
      setPhase('ready')
    }
  }
}
