// What one practises with at this desk: how the take is heard, how the loop goes round, the click, the tapped tempo, the keys.
import { useChangePreferences, usePreferences } from '@client/features/practice/api'
import { useClicks } from '@client/features/practice/use-clicks'
import { useOwnKeys, type OwnKeys } from '@client/features/practice/use-own-keys'
import { useVolume } from '@client/features/practice/use-volume'
import type { ClickControls } from '@client/transport/click-part'
import type { Player } from '@client/transport/player'
import { useAids, type AidsControls } from '@client/transport/use-aids'
import { useLoopManner, type LoopMannerControls } from '@client/transport/use-loop-manner'
import { useTapTempo, type TapTempoControls } from '@client/transport/use-tap-tempo'
import type { VolumeProps } from '@client/transport/volume'
import type { DeskModel } from './desk-model'

export interface DeskPractice {
  listening: AidsControls
  manner: LoopMannerControls
  click: ClickControls
  tapping: TapTempoControls
  volume: VolumeProps
  keys: OwnKeys
  /** Felt beats a minute at full speed where the line is; null without bars. */
  tempoNow: () => number | null
}

export const useDeskPractice = (
  player: Player,
  { barMap, durationSec }: DeskModel,
  tuningCents: number | null
): DeskPractice => {
  const { preferences } = usePreferences()
  const change = useChangePreferences()
  const tempoNow = () => barMap?.tempoAt(player.heardPosition) ?? null
  const heardTempo = () => {
    const tempo = tempoNow()
    return tempo === null ? null : tempo * player.rate
  }
  return {
    listening: useAids(
      player,
      { topHz: preferences.lowFocusTopHz, onTopHz: (lowFocusTopHz) => change({ lowFocusTopHz }) },
      tuningCents
    ),
    manner: useLoopManner(player, barMap),
    click: useClicks(player, barMap, durationSec),
    tapping: useTapTempo(heardTempo),
    volume: useVolume(player),
    keys: useOwnKeys(),
    tempoNow
  }
}
