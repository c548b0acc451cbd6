import { useRef } from 'react'
import { useScope } from '@client/lib/scope'
import { timeWords } from '@shared/timing/time-words'
import type { Player } from './player'

/** `m:ss.d`, written straight into the page ten times a second; nothing else draws while it runs. */
export function PlaceClock({ player }: { player: Player }) {
  const box = useRef<HTMLSpanElement>(null)
  useScope(
    (scope) => {
      const write = () => {
        const words = timeWords(player.heardPosition)
        if (box.current && box.current.textContent !== words) box.current.textContent = words
      }
      write()
      scope.interval(write, 100)
      scope.add(player.on('jump', write))
    },
    [player]
  )
  return (
    <span className="grid leading-tight">
      <span className="text-xs text-pencil">Place</span>
      <span ref={box} className="min-w-14 font-figures" aria-live="off" />
    </span>
  )
}
