import { useEffect, useState } from 'react'
import { useScope } from '@client/lib/scope'
import { createPlayer } from '@client/transport/create-player'
import type { Player } from '@client/transport/player'
import { usePlayer } from '@client/transport/use-player'
import { IconButton } from '@client/ui/icon-button'
import { Slider } from '@client/ui/slider'
import { spokenTime, timeWords } from '@shared/timing/time-words'
import type { Sec } from '@shared/units'

/** Hears what was just recorded, from any place of it. */
export function ListenBack({ file, durationSec }: { file: Blob; durationSec: Sec }) {
  const [player, setPlayer] = useState<Player | null>(null)
  useEffect(() => {
    const url = URL.createObjectURL(file)
    const made = createPlayer()
    let isOver = false
    void made.load({ url, file, durationSec }).then(() => isOver || setPlayer(made))
    return () => {
      isOver = true
      made.dispose()
      URL.revokeObjectURL(url)
      setPlayer(null)
    }
  }, [file, durationSec])
  return player ? <ListenBar player={player} durationSec={durationSec} /> : null
}

function ListenBar({ player, durationSec }: { player: Player; durationSec: Sec }) {
  const { state } = usePlayer(player)
  const [sec, setSec] = useState(0)
  useScope((scope) => void scope.interval(() => setSec(player.heardPosition), 100), [player])
  const isPlaying = state === 'playing'
  return (
    <div className="flex items-center gap-4">
      <IconButton
        icon={isPlaying ? 'pause' : 'play'}
        look="plain"
        label={isPlaying ? 'Pause' : 'Listen to it'}
        onClick={() => (isPlaying ? player.pause() : void player.play())}
      />
      <div className="min-w-0 flex-1">
        <Slider
          label="Place"
          says={`${timeWords(sec)} of ${timeWords(durationSec)}`}
          value={Math.min(sec, durationSec)}
          min={0}
          max={Math.max(durationSec, 0.1)}
          step={0.1}
          bigStep={5}
          onChange={(next) => {
            player.seek(next)
            setSec(next)
          }}
        />
        <span className="sr-only">{spokenTime(durationSec)} long</span>
      </div>
    </div>
  )
}
