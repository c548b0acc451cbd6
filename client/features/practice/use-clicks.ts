// The click and the count-in as a person likes them, laid along the take that is open.
import { useEffect, useMemo } from 'react'
import type { ClickControls } from '@client/transport/click-part'
import type { Player } from '@client/transport/player'
import { usePlayer } from '@client/transport/use-player'
import { clicksFor } from '@shared/practice/click-pattern'
import { countInFor } from '@shared/practice/count-in'
import type { BarMap } from '@shared/timing/bar-map'
import type { Sec } from '@shared/units'
import { useChangePreferences, usePreferences } from './api'

export const useClicks = (player: Player, barMap: BarMap | null, durationSec: Sec): ClickControls => {
  const { preferences } = usePreferences()
  const change = useChangePreferences()
  const { capabilities } = usePlayer(player)
  const { click, countIn } = preferences
  const { isOn, level } = click
  const laid = useMemo(() => {
    if (!barMap || !isOn) return null
    return clicksFor(barMap, click, { startSec: 0, endSec: durationSec })
  }, [barMap, isOn, click, durationSec])

  useEffect(() => {
    player.setClicks(laid, level)
  }, [player, laid, level])
  useEffect(() => {
    player.setCountIn(barMap ? (startSec, rate) => countInFor(barMap, startSec, rate, countIn) : null)
  }, [player, barMap, countIn])
  return {
    settings: click,
    countIn,
    meter: barMap?.meterAt(1) ?? null,
    canClick: capabilities.clicks,
    change: (part) => change({ click: withoutNothing({ ...click, ...part }) }),
    setCountIn: (choice) => change({ countIn: choice })
  }
}

/** Straight halves have no swing at all. */
const withoutNothing = <T extends { swing?: number }>({ swing, ...rest }: T) =>
  swing === undefined ? rest : { ...rest, swing }
