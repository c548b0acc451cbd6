import { useState } from 'react'
import { useScope } from '@client/lib/scope'
import type { Player } from '@client/transport/player'
import type { BarMap } from '@shared/timing/bar-map'
import type { Span } from '@shared/timing/types'
import type { BarIndex } from '@shared/units'

const lookMs = 200

/** The bar the line is in, redrawing only when it is another one; null without bars. */
export const useBarHere = (player: Player, barMap: BarMap | null): BarIndex | null => {
  const [bar, setBar] = useState<BarIndex | null>(null)
  useScope(
    (scope) => {
      const look = () => setBar(barMap ? barMap.barAt(player.heardPosition) : null)
      look()
      scope.interval(look, lookMs)
      scope.add(player.on('jump', ({ positionSec }) => setBar(barMap ? barMap.barAt(positionSec) : null)))
    },
    [player, barMap]
  )
  return bar
}

/** What a comment is about when nothing is selected: the bar the line is in, or the moment. */
export const spanHere = (player: Player, barMap: BarMap | null): Span => {
  const sec = player.heardPosition
  if (!barMap) return { startSec: sec, endSec: sec }
  const { startSec, endSec } = barMap.barSpan(barMap.barAt(sec))
  return { startSec: Math.max(0, startSec), endSec: Math.min(player.durationSec, endSec) }
}
