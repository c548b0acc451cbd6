import type { RefObject } from 'react'
import { nextCountIn, countInWords } from '@client/transport/click-part'
import type { TransportControls } from '@client/transport/controls'
import { useTransportKeys, type KeyActions } from '@client/transport/keys'
import { rateLimits, type Player } from '@client/transport/player'
import type { TimelineHandle } from '@client/timeline/timeline'
import { nudgeSec, snapSec, type Snap } from '@shared/timing/snap'
import type { Span } from '@shared/timing/types'
import type { DeskModel } from './desk-model'
import type { DeskPractice } from './use-desk-practice'

export interface DeskKeysDeps {
  player: Player
  controls: TransportControls
  model: DeskModel
  selection: Span | null
  snap: Snap
  practice: DeskPractice
  timeline: RefObject<TimelineHandle | null>
  onSelect: (span: Span | null) => void
  onFollow: () => void
  onWrite: () => void
  onUndo: () => void
  onRedo?: () => void
  onAgainBefore: () => void
  onKeySheet: () => void
  /** What a key has set, for those who do not see it. */
  say: (words: string) => void
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
  const { keys } = deps.practice
  useTransportKeys(
    {
      ...practiceKeys(deps),
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
    { map: keys.map, isOff: keys.areOff }
  )
}

/** Keys of what one practises with: those that cannot do anything here are left alone. */
const practiceKeys = ({ practice, onAgainBefore, say }: DeskKeysDeps): KeyActions => {
  const { listening, click, tapping } = practice
  const { aids, semitones, can } = listening
  const pitch = (steps: number) => () => listening.setSemitones(semitones + steps)
  return {
    againBefore: onAgainBefore,
    tapTempo: tapping.tap,
    ...(can.pitch ? { pitchUp: pitch(1), pitchDown: pitch(-1) } : {}),
    ...(can.aids
      ? {
          octaveUp: () => {
            listening.setOctaveUp(!aids.isOctaveUp)
            say(aids.isOctaveUp ? 'As it sounds.' : 'An octave up.')
          },
          lowFocus: () => {
            listening.setLowFocus(!aids.lowFocus.isOn)
            say(aids.lowFocus.isOn ? 'Low focus is off.' : 'Low focus is on.')
          }
        }
      : {}),
    ...(click.canClick && click.meter
      ? {
          clickOnOff: () => {
            click.change({ isOn: !click.settings.isOn })
            say(click.settings.isOn ? 'The click is off.' : 'The click is on.')
          },
          countIn: () => {
            const next = nextCountIn(click.countIn)
            click.setCountIn(next)
            say(next === 'none' ? 'No count-in.' : `It ${countInWords[next]}.`)
          }
        }
      : {})
  }
}
