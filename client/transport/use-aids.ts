// How the take is listened to: each person's own, in a session too.
import { plainAids, pitchLimits, type Aids, type Channel } from '@shared/audio/listening'
import type { Player, PlayerCapabilities } from './player'
import { usePlayer } from './use-player'

export interface AidsControls {
  aids: Aids
  /** Beside the octave switch. */
  semitones: number
  can: Pick<PlayerCapabilities, 'pitch' | 'aids'>
  /** Where low focus ends, also while it is off; hertz. */
  topHz: number
  /** How the take is tuned against A 440, whole cents; null when that is not known or too little to mend. */
  takeCents: number | null
  setOctaveUp: (isOctaveUp: boolean) => void
  setLowFocus: (isOn: boolean) => void
  setTopHz: (hz: number) => void
  setChannel: (channel: Channel) => void
  setCents: (cents: number) => void
  setSemitones: (semitones: number) => void
  /** As recorded. */
  reset: () => void
}

/** A take this close to A 440 is in tune, cents. */
const inTuneCents = 3

/** An octave either way; the octave switch comes on top of it. */
export const semitoneLimit = 12

export interface KeptTop {
  topHz: number
  onTopHz: (hz: number) => void
}

export const useAids = (
  player: Player,
  { topHz, onTopHz }: KeptTop,
  tuningCents: number | null = null
): AidsControls => {
  const { aids, semitones, capabilities } = usePlayer(player)
  const takeCents = tuningCents !== null && Math.abs(tuningCents) > inTuneCents ? Math.round(tuningCents) : null
  const change = (part: Partial<Aids>): void => player.setAids({ ...player.aids, ...part })
  return {
    aids,
    semitones,
    can: capabilities,
    topHz: aids.lowFocus.isOn ? aids.lowFocus.topHz : topHz,
    takeCents,
    setOctaveUp: (isOctaveUp) => change({ isOctaveUp }),
    setLowFocus: (isOn) => change({ lowFocus: { isOn, topHz } }),
    setTopHz: (hz) => {
      change({ lowFocus: { isOn: player.aids.lowFocus.isOn, topHz: hz } })
      onTopHz(hz)
    },
    setChannel: (channel) => change({ channel }),
    setCents: (cents) => change({ cents: Math.max(-pitchLimits.cents, Math.min(pitchLimits.cents, cents)) }),
    setSemitones: (next) => player.setPitch(Math.max(-semitoneLimit, Math.min(semitoneLimit, next))),
    reset: () => {
      player.setPitch(0)
      player.setAids({ ...plainAids, lowFocus: { isOn: false, topHz } })
    }
  }
}
