// What the desk does to the sound. Everything that plays, jumps, slows or loops goes through one of these, so that a
// listening session can put its own in the place of the player's.
import type { Player } from '@client/transport/player'
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'

export interface TransportControls {
  play(): void
  pause(): void
  seek(sec: Sec): void
  setRate(rate: number): void
  setLoop(span: Span | null): void
}

/** Alone at the desk: straight to the player. */
export const soloControls = (player: Player): TransportControls => ({
  play: () => void player.play(),
  pause: () => player.pause(),
  seek: (sec) => player.seek(sec),
  setRate: (rate) => player.setRate(rate),
  setLoop: (span) => player.setLoop(span ? { span } : null)
})
