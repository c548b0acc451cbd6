import { useEffect, useState } from 'react'
import type { Player } from '@client/transport/player'
import type { Span } from '@shared/timing/types'
import type { Capture } from './capture'
import type { HeadphoneChoice } from './headphones-form'
import { startOverRecording, type OverRecorder } from './over-recorder'
import type { OverRecordingProps } from './over-recording'
import { loopOver } from './played-words'
import type { Recorded } from './try-store'
import type { OverPlayer } from './use-over-player'

interface Deps extends Pick<OverRecordingProps, 'take' | 'player' | 'ownerId' | 'onBegin' | 'onRunning'> {
  heard: Player
  overPlayer: OverPlayer
  onRecorded: (recorded: Recorded) => void
}

export interface Begin {
  capture: Capture
  delaySec: number
  choice: HeadphoneChoice
  span: Span | null
  firstNumber: number
}

const shortWords = 'That was too short to be a try.'

/** The recording under way, if there is one. */
export const useOverRecorder = (deps: Deps) => {
  const { take, player: desk, heard, overPlayer, ownerId, onBegin, onRunning, onRecorded } = deps
  const [recorder, setRecorder] = useState<OverRecorder | null>(null)
  const [isPreparing, setPreparing] = useState(false)
  /** Why the last one came to nothing. */
  const [lost, setLost] = useState<string | null>(null)
  useEffect(() => () => recorder?.dispose(), [recorder])
  const isRunning = recorder !== null
  useEffect(() => {
    onRunning?.(isRunning)
  }, [onRunning, isRunning])

  const begin = async ({ capture, delaySec, choice, span, firstNumber }: Begin): Promise<void> => {
    const isPart = span !== null && choice.where !== 'here'
    const startSec = isPart ? span.startSec : desk.heardPosition
    const loop = isPart && choice.where === 'round' ? loopOver(span, desk.loop) : null
    onBegin()
    setLost(null)
    setPreparing(true)
    try {
      await overPlayer.forRecording(choice, startSec)
    } finally {
      setPreparing(false)
    }
    if (loop) heard.setLoop(loop)
    // As the player has tidied it.
    const round = heard.loop?.span ?? null
    const started = startOverRecording({
      player: heard,
      capture,
      delaySec,
      bounds: round ?? { startSec, endSec: isPart ? span.endSec : null },
      isLooping: round !== null,
      ownerId,
      takeId: take.id,
      firstNumber
    })
    setRecorder(started)
    const unlisten = started.subscribe(() => {
      const { state, fault } = started.view()
      if (state !== 'stopped') return
      unlisten()
      void started.stop().then((recorded) => {
        setRecorder(null)
        if (recorded) onRecorded(recorded)
        if (!recorded || fault) setLost(fault ?? shortWords)
      })
    })
  }
  return { recorder, isPreparing, lost, begin }
}
