import { useEffect, useState } from 'react'
import { createScope } from '@client/lib/scope'
import type { PeaksSource } from '@client/timeline/peaks-source'
import { createPlayer } from '@client/transport/create-player'
import type { Player } from '@client/transport/player'
import type { Sec } from '@shared/units'
import { measureDuration } from './measure'
import { canDraw, peaksOfFile } from './trial-peaks'
import type { Trial } from './trial-store'

export interface TrialSound {
  player: Player | null
  durationSec: Sec
  peaks: PeaksSource | null
  /** opening: until it can be played. drawing: it plays, the waveform is still to come. */
  state: 'opening' | 'drawing' | 'drawn' | 'undrawn' | 'unplayable'
}

const opening: TrialSound = { player: null, durationSec: 0, peaks: null, state: 'opening' }

/** The sound of a file of this browser: plays as soon as its length is known, the waveform follows. */
export const useTrialSound = ({ file, durationSec: knownSec }: Trial): TrialSound => {
  const [sound, setSound] = useState(opening)
  useEffect(() => {
    const scope = createScope()
    const url = URL.createObjectURL(file)
    const player = createPlayer()
    const open = async (): Promise<void> => {
      const durationSec = knownSec ?? (await measureDuration(url, scope))
      if (scope.disposed) return
      if (durationSec === null) return setSound({ ...opening, state: 'unplayable' })
      await player.load({ url, file, durationSec })
      if (scope.disposed) return
      if (player.state === 'failed') return setSound({ ...opening, state: 'unplayable' })
      const isDrawn = canDraw(file.size, durationSec)
      setSound({ player, durationSec, peaks: null, state: isDrawn ? 'drawing' : 'undrawn' })
      // Starts by itself after the drop or the click that brought it here; after a reload it waits.
      if (navigator.userActivation?.hasBeenActive ?? true) void player.play()
      const peaks = isDrawn ? await peaksOfFile(file) : null
      if (!scope.disposed) setSound({ player, durationSec, peaks, state: peaks ? 'drawn' : 'undrawn' })
    }
    void open()
    return () => {
      scope.dispose()
      player.dispose()
      URL.revokeObjectURL(url)
      setSound(opening)
    }
  }, [file, knownSec])
  return sound
}
