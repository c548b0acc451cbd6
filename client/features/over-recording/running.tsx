import { useEffect, useRef, useState, useSyncExternalStore } from 'react'
import { timeWords } from '@shared/timing/time-words'
import type { Player } from '@client/transport/player'
import { LevelBar } from '@client/transport/microphone/level-bar'
import { useScope } from '@client/lib/scope'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import type { OverRecorder } from './over-recorder'

const stateWords = {
  starting: 'Starting',
  counting: 'Counting in',
  playing: 'Recording',
  stopping: 'Storing the last notes …',
  stopped: 'Recorded'
}

export interface RunningProps {
  recorder: OverRecorder
  stream: MediaStream | null
  player: Player
  placeWords: (sec: number) => string
}

/** While it records: where the take is, how loud it comes in, and the way to stop, which has the focus. */
export function Running({ recorder, stream, player, placeWords }: RunningProps) {
  const { state, fault } = useSyncExternalStore(recorder.subscribe, recorder.view)
  const [now, setNow] = useState({ lengthSec: 0, placeSec: player.heardPosition })
  const box = useRef<HTMLDivElement>(null)
  useScope(
    (scope) =>
      void scope.interval(() => setNow({ lengthSec: recorder.lengthSec(), placeSec: player.heardPosition }), 100),
    [recorder, player]
  )
  useEffect(() => {
    box.current?.querySelector('button')?.focus()
  }, [])
  return (
    <div ref={box} className="grid gap-3">
      {fault ? <Notice kind="fault">{fault}</Notice> : null}
      <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1">
        <span role="status" className="font-semibold">
          {stateWords[state]}
        </span>
        <span className="font-figures text-xl">{timeWords(now.lengthSec)}</span>
        <span className="text-pencil">{placeWords(now.placeSec)}</span>
      </div>
      {stream ? <LevelBar stream={stream} /> : null}
      <p className="text-sm text-pencil">Every second is kept in this browser as you play.</p>
      <div>
        <Button look="primary" busy={state === 'stopping'} onClick={() => void recorder.stop()}>
          Stop
        </Button>
      </div>
    </div>
  )
}
