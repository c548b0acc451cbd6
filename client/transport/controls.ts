// What the desk does to the sound. Everything that plays, jumps, slows or loops goes through one of these, so that a
// listening session can put its own in the place of the player's.
import type { Player, PlayerLoop } from '@client/transport/player'
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'

export interface TransportControls {
  play(): void
  pause(): void
  seek(sec: Sec): void
  setRate(rate: number): void
  setLoop(span: Span | null): void
}

/** How a loop goes round when one practises alone: its rest, its ends, the speed that changes. */
export interface LoopWays {
  loopFor(span: Span): PlayerLoop
  /** A speed was chosen by hand: a loop that changes it by itself has to stop doing so. */
  handRate(): void
}

const plainWays: LoopWays = { loopFor: (span) => ({ span }), handRate: () => undefined }

/** Alone at the desk: straight to the player. */
export const soloControls = (player: Player, ways: LoopWays = plainWays): TransportControls => ({
  play: () => void player.play(),
  pause: () => player.pause(),
  seek: (sec) => player.seek(sec),
  setRate: (rate) => {
    player.setRate(rate)
    ways.handRate()
  },
  setLoop: (span) => player.setLoop(span ? ways.loopFor(span) : null)
})
