import { useEffect, useState } from 'react'
import type { Take } from '@shared/contracts/takes'
import { audioUrl, piecesUrl } from '@client/features/takes/api'
import { createPlayer } from '@client/transport/create-player'
import type { Player } from '@client/transport/player'

export interface DeskPlayer {
  /** Null before the first drawing. */
  player: Player | null
  /** What this browser or address cannot do, in words. */
  missing: string | null
}

/** The sound of a take for as long as its desk is open. */
export const useDeskPlayer = (take: Take, onTrouble: (message: string) => void): DeskPlayer => {
  const [player, setPlayer] = useState<Player | null>(null)
  const [missing, setMissing] = useState<string | null>(null)
  const { id, state, durationSec, gainDb } = take
  useEffect(() => {
    const made = createPlayer({ onMissing: setMissing })
    made.on('fault', ({ message }) => onTrouble(message))
    made.on('blocked', () => onTrouble('Press play once more: the browser lets sound out after a tap.'))
    // Made in an effect, so that leaving and coming back (also as React's strict mode does it) makes a new one.
    // oxlint-disable-next-line react/set-state-in-effect
    setPlayer(made)
    return () => made.dispose()
  }, [onTrouble])
  useEffect(() => {
    if (!player || state !== 'ready' || durationSec === null) return
    void player.load({ url: audioUrl(id), piecesUrl: piecesUrl(id), durationSec, gainDb: gainDb ?? 0 })
  }, [player, id, state, durationSec, gainDb])
  return { player, missing }
}
