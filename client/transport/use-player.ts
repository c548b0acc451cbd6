// What components may know of a player: its state as it changes. The position is not state; read it per frame.
import { useRef, useSyncExternalStore } from 'react'
import type { Aids } from '@shared/audio/listening'
import type { Player, PlayerCapabilities, PlayerLoop, PlayerState } from './player'

export interface PlayerView {
  state: PlayerState
  rate: number
  semitones: number
  aids: Aids
  /** Another object when another engine has taken over. */
  capabilities: PlayerCapabilities
  loop: PlayerLoop | null
  /** Passes done since the loop was set. */
  turns: number
}

const parts = ['state', 'rate', 'semitones', 'aids', 'capabilities', 'loop', 'turns'] as const

export const usePlayer = (player: Player): PlayerView => {
  const turns = useRef(0)
  const shown = useRef<PlayerView | null>(null)
  return useSyncExternalStore(
    (changed) => {
      const stops = [
        player.on('state', changed),
        player.on('rate', changed),
        player.on('pitch', changed),
        player.on('aids', changed),
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
      const { state, rate, semitones, aids, capabilities, loop } = player
      const next: PlayerView = { state, rate, semitones, aids, capabilities, loop, turns: turns.current }
      const last = shown.current
      if (!last || parts.some((part) => last[part] !== next[part])) shown.current = next
      return shown.current ?? next
    }
  )
}
