import type { RefObject } from 'react'
import type { TransportControls } from '@client/transport/controls'
import { useTransportKeys } from '@client/transport/keys'
import { rateLimits, type Player } from '@client/transport/player'
import type { TimelineHandle } from '@client/timeline/timeline'
import { nudgeSec, snapSec, type Snap } from '@shared/timing/snap'
import type { Span } from '@shared/timing/types'
import type { DeskModel } from './desk-model'

export interface DeskKeysDeps {
  player: Player
  controls: TransportControls
  model: DeskModel
  selection: Span | null
  snap: Snap
  areOff: boolean
  timeline: RefObject<TimelineHandle | null>
  onSelect: (span: Span | null) => void
  onFollow: () => void
  onWrite: () => void
  onUndo: () => void
  onRedo?: () => void
  onKeySheet: () => void
}

/** Moves the line by bars or beats; by tenths of a second where there are none. */
export const stepBy = (deps: Pick<DeskKeysDeps, 'player' | 'controls' | 'model'>, snap: Snap, steps: number): void =>
  deps.controls.seek(nudgeSec(deps.player.heardPosition, snap, steps, deps.model))

export const playOrPause = ({ player, controls }: Pick<DeskKeysDeps, 'player' | 'controls'>): void =>
  player.state === 'playing' ? controls.pause() : controls.play()

const speedStep = 0.05

export const useDeskKeys = (deps: DeskKeysDeps): void => {
  const { player, controls, model, selection, snap, timeline, onSelect } = deps
  const setSpeed = (rate: number) =>
    controls.setRate(Math.min(rateLimits.max, Math.max(rateLimits.min, Math.round(rate * 100) / 100)))
  const edge = (which: 'start' | 'end') => {
    const sec = snapSec(player.heardPosition, snap, model)
    const [start, end] =
      which === 'start' ? [sec, selection?.endSec ?? model.durationSec] : [selection?.startSec ?? 0, sec]
    if (end > start) onSelect({ startSec: start, endSec: end })
  }
  useTransportKeys(
    {
      playPause: () => playOrPause(deps),
      backBar: () => stepBy(deps, 'bar', -1),
      onBar: () => stepBy(deps, 'bar', 1),
      backBeat: () => stepBy(deps, 'beat', -1),
      onBeat: () => stepBy(deps, 'beat', 1),
      toStart: () => controls.seek(player.loop?.span.startSec ?? 0),
      loop: () => controls.setLoop(player.loop ? null : selection),
      loopStart: () => edge('start'),
      loopEnd: () => edge('end'),
      slower: () => setSpeed(player.rate - speedStep),
      faster: () => setSpeed(player.rate + speedStep),
      fullSpeed: () => setSpeed(1),
      zoomIn: () => timeline.current?.zoom(1),
      zoomOut: () => timeline.current?.zoom(-1),
      follow: deps.onFollow,
      comment: deps.onWrite,
      undo: deps.onUndo,
      ...(deps.onRedo ? { redo: deps.onRedo } : {}),
      keySheet: deps.onKeySheet
    },
    { isOff: deps.areOff }
  )
}
