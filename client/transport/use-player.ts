// What components may know of a player: its state as it changes. The position is not state; read it per frame.
import { useRef, useSyncExternalStore } from 'react'
import type { Player, PlayerLoop, PlayerState } from './player'

export interface PlayerView {
  state: PlayerState
  rate: number
  loop: PlayerLoop | null
  /** Passes done since the loop was set. */
  turns: number
}

export const usePlayer = (player: Player): PlayerView => {
  const turns = useRef(0)
  const shown = useRef<PlayerView | null>(null)
  return useSyncExternalStore(
    (changed) => {
      const stops = [
        player.on('state', changed),
        player.on('rate', changed),
        player.on('loop', () => {
          turns.current = 0
          changed()
        }),
        player.on('turn', ({ count }) => {
          turns.current = count
          changed()
        })
      ]
      return () => stops.forEach((stop) => stop())
    },
    () => {
      const { state, rate, loop } = player
      const next = { state, rate, loop, turns: turns.current }
      const last = shown.current
      const isSame = last?.state === state && last.rate === rate && last.loop === loop && last.turns === next.turns
      if (!isSame) shown.current = next
      return shown.current ?? next
    }
  )
}
