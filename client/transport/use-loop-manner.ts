// How the loop goes round: faster from pass to pass, with a rest in between, with soft ends.
import { useMemo, useRef, useState } from 'react'
import { useScope } from '@client/lib/scope'
import { useLatest } from '@client/lib/use-latest'
import { ladderRate, type SpeedLadder } from '@shared/practice/ladder'
import { loopFrom } from '@shared/practice/loops'
import type { BarMap } from '@shared/timing/bar-map'
import type { Sec } from '@shared/units'
import type { LoopWays } from './controls'
import type { Player } from './player'

export interface LoopManner {
  /** Kept while it is off. */
  ladder: SpeedLadder
  isLadderOn: boolean
  restBeats: number
  hasSoftEnds: boolean
}

export interface LoopMannerControls extends LoopManner {
  /** The same object all along. */
  ways: LoopWays
  /** A loop that is on goes on in the new manner, its passes counted afresh. */
  set: (change: Partial<LoopManner>) => void
}

export const usualManner: LoopManner = {
  ladder: { from: 0.6, to: 1, step: 0.05, every: 4 },
  isLadderOn: false,
  restBeats: 0,
  hasSoftEnds: false
}

/** Long enough to take the edge off a note that is cut, short enough to leave its attack. By ear, no source. */
const softEndSec: Sec = 0.03

export const useLoopManner = (player: Player, barMap: BarMap | null): LoopMannerControls => {
  const [manner, show] = useState(usualManner)
  const now = useRef(manner)
  const bars = useLatest(barMap)
  const acts = useMemo(() => {
    const loopFor: LoopWays['loopFor'] = (span) => {
      const { ladder, isLadderOn, restBeats, hasSoftEnds } = now.current
      const loop = loopFrom({ span, ladder: isLadderOn ? ladder : null, restBeats }, bars.current)
      return hasSoftEnds ? { ...loop, fadeSec: softEndSec } : loop
    }
    const set: LoopMannerControls['set'] = (change) => {
      now.current = { ...now.current, ...change }
      show(now.current)
      if (player.loop) player.setLoop(loopFor(player.loop.span))
    }
    const handRate = (): void => {
      if (player.loop?.ladder) set({ isLadderOn: false })
    }
    return { set, ways: { loopFor, handRate } }
  }, [player, bars])
  useScope(
    (scope) => {
      // An engine that plans ahead climbs by itself; for the others the speed is set pass by pass.
      const climb = (pass: number): void => {
        const ladder = player.loop?.ladder
        if (ladder && !player.capabilities.schedule) player.setRate(ladderRate(ladder, pass))
      }
      scope.add(player.on('loop', () => climb(0)))
      scope.add(player.on('turn', ({ count }) => climb(count)))
    },
    [player]
  )
  return useMemo(() => ({ ...manner, ...acts }), [manner, acts])
}
