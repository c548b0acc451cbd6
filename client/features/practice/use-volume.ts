import { useEffect, useState } from 'react'
import type { Player } from '@client/transport/player'
import type { VolumeProps } from '@client/transport/volume'
import { useChangePreferences, usePreferences } from './api'

/** Until it is known how loud it was last: softer than anybody is likely to have had it. */
export const quietVolume = 0.3

/** The volume as it was left, in whichever browser. What sounds already is never made louder by learning of it. */
export const useVolume = (player: Player): VolumeProps => {
  const { preferences, isKnown } = usePreferences()
  const change = useChangePreferences()
  const [start, setStart] = useState<number | null>(isKnown ? preferences.volume : null)
  const [chosen, choose] = useState<number | null>(null)
  if (start === null && isKnown)
    setStart(player.state === 'playing' ? Math.min(quietVolume, preferences.volume) : preferences.volume)
  const volume = chosen ?? start ?? quietVolume
  useEffect(() => {
    player.setVolume(volume)
  }, [player, volume])
  return {
    volume,
    onVolume: (next) => {
      choose(next)
      change({ volume: next })
    }
  }
}
