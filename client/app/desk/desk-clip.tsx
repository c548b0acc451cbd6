import { ClipDialog } from '@client/features/clips/clip-dialog'
import type { Player } from '@client/transport/player'
import { usePlayer } from '@client/transport/use-player'
import type { Span } from '@shared/timing/types'
import type { DeskModel } from './desk-model'
import type { DeskPractice } from './use-desk-practice'

export interface DeskClipProps {
  takeId: string
  player: Player
  model: DeskModel
  practice: DeskPractice
  selection: Span | null
  onClose: () => void
}

/** The selection (or else the loop that is on), as it is heard now, kept as a file. */
export function DeskClip({ takeId, player, model, practice, selection, onClose }: DeskClipProps) {
  const { loop, rate } = usePlayer(player)
  const span = selection ?? loop?.span ?? null
  const { aids, semitones } = practice.listening
  const { settings, countIn } = practice.click
  const { isOn, level, ...click } = settings
  return (
    <ClipDialog
      takeId={takeId}
      barMap={model.barMap}
      passage={
        span && span.endSec > span.startSec
          ? { span, rate, semitones, aids, click, clickLevel: level, isClickOn: isOn, countIn }
          : null
      }
      wordsFor={(one) => {
        const { place, where } = model.placeOf(one)
        return where ? `${place}, ${where}` : place
      }}
      onClose={onClose}
    />
  )
}
