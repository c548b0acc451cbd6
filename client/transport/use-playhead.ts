import { useState } from 'react'
import type { Sec } from '@shared/units'
import { useScope } from '@client/lib/scope'
import type { Player } from './player'

const lookEveryMs = 100

/** Where the sound is, to the tenth of a second: for words, not for edits. */
export const usePlayhead = (player: Player): Sec => {
  const [sec, setSec] = useState(() => player.heardPosition)
  useScope(
    (scope) => {
      scope.interval(() => setSec(Math.round(player.heardPosition * 10) / 10), lookEveryMs)
    },
    [player]
  )
  return sec
}
