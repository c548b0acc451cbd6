import type { SavedLoop } from '@shared/contracts/saved-loops'
import { placeBefore } from '@shared/practice/again-from'
import type { Span } from '@shared/timing/types'
import { useSavedLoops } from '@client/features/practice/api'
import { OwnKeySheet } from '@client/features/practice/own-key-sheet'
import { SavedLoops } from '@client/features/practice/saved-loops'
import type { TransportControls } from '@client/transport/controls'
import type { Player } from '@client/transport/player'
import { TransportBar } from '@client/transport/transport-bar'
import { usePlayer } from '@client/transport/use-player'
import type { DeskModel } from './desk-model'
import { playOrPause, stepBy } from './use-desk-keys'
import type { DeskPractice } from './use-desk-practice'

export interface DeskTransportProps {
  takeId: string
  player: Player
  controls: TransportControls
  model: DeskModel
  practice: DeskPractice
  selection: Span | null
  /** Loop and speed are everybody's. */
  isShared: boolean
  missing: string | null
  isKeySheetOpen: boolean
  onKeySheet: (isOpen: boolean) => void
  /** A kept loop is taken up: what it is looped in is set already. */
  onKeptLoop: (span: Span) => void
}

/** The bar at the foot of the desk, with what this person keeps. */
export function DeskTransport(props: DeskTransportProps) {
  const { player, controls, model, practice, selection } = props
  const spanWords = (span: Span) => model.placeOf(span).place
  return (
    <>
      <TransportBar
        player={player}
        commands={{
          playPause: () => playOrPause({ player, controls }),
          setRate: controls.setRate,
          setLoop: controls.setLoop,
          nudge: (direction) => stepBy({ player, controls, model }, 'bar', direction),
          againBefore: () => againBefore({ player, controls, model })
        }}
        selection={selection}
        spanWords={spanWords}
        tempoNow={practice.tempoNow}
        listening={practice.listening}
        manner={practice.manner}
        tapping={practice.tapping}
        click={practice.click}
        kept={<KeptLoops {...props} spanWords={spanWords} />}
        {...practice.volume}
        isShared={props.isShared}
        missing={props.missing}
        keyMap={practice.keys.map}
        onKeySheet={() => props.onKeySheet(true)}
      />
      {props.isKeySheetOpen ? <OwnKeySheet keys={practice.keys} onClose={() => props.onKeySheet(false)} /> : null}
    </>
  )
}

/** Bars that are heard again before the place one is at. */
const barsBefore = 2

export const againBefore = ({
  player,
  controls,
  model
}: Pick<DeskTransportProps, 'player' | 'controls' | 'model'>): void => {
  controls.seek(placeBefore(model.barMap, player.heardPosition, barsBefore))
  if (player.state !== 'playing') controls.play()
}

/** Two loops are one when they turn at the same places. */
const sameSec = 1e-3
const isSame = (a: Span, b: Span): boolean =>
  Math.abs(a.startSec - b.startSec) < sameSec && Math.abs(a.endSec - b.endSec) < sameSec

function KeptLoops(props: DeskTransportProps & { spanWords: (span: Span) => string }) {
  const { takeId, player, controls, practice, selection, isShared } = props
  const { manner } = practice
  const { loop, rate } = usePlayer(player)
  const list = useSavedLoops(takeId)
  const span = loop?.span ?? selection
  const ladder = manner.isLadderOn && !isShared ? manner.ladder : null
  const takeUp = (kept: SavedLoop): void => {
    if (!isShared) {
      const { restBeats } = kept
      manner.set({ restBeats, isLadderOn: kept.ladder !== null, ...(kept.ladder ? { ladder: kept.ladder } : {}) })
    }
    if (kept.rate !== null && !kept.ladder) controls.setRate(kept.rate)
    props.onKeptLoop(kept.span)
  }
  return (
    <SavedLoops
      takeId={takeId}
      current={
        span ? { span, rate: ladder ? null : Math.round(rate * 100) / 100, ladder, restBeats: manner.restBeats } : null
      }
      wordsFor={props.spanWords}
      loopingId={list.data?.items.find((one) => loop && isSame(one.span, loop.span))?.id ?? null}
      onLoop={takeUp}
    />
  )
}
