import { useEffect, useRef, useState, type ReactNode } from 'react'
import { useScope } from '@client/lib/scope'
import { useLatest } from '@client/lib/use-latest'
import { Timeline, type TimelineHandle } from '@client/timeline/timeline'
import { soloControls } from '@client/transport/controls'
import { defaultKeyMap, useTransportKeys } from '@client/transport/keys'
import { rateLimits, type Player } from '@client/transport/player'
import { KeySheet } from '@client/transport/key-sheet'
import { TransportBar } from '@client/transport/transport-bar'
import { useAids } from '@client/transport/use-aids'
import { useLoopManner } from '@client/transport/use-loop-manner'
import { useTapTempo } from '@client/transport/use-tap-tempo'
import { Notice } from '@client/ui/notice'
import { plainAids } from '@shared/audio/listening'
import { placeBefore } from '@shared/practice/again-from'
import { nudgeSec } from '@shared/timing/snap'
import { spokenTime, timeWords } from '@shared/timing/time-words'
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'
import type { Trial } from './trial-store'
import { useTrialSound, type TrialSound } from './use-trial-sound'

export interface TrialDeskProps {
  trial: Trial
  /** Told on every change, so that trimming can begin with what is selected. */
  onSelection: (span: Span | null) => void
  onLength: (durationSec: Sec) => void
  /** Something stands over the desk: it falls silent, since its controls cannot be reached. */
  isCovered: boolean
  /** At the right of the title. */
  actions: ReactNode
}

/** A recording that nothing is known of yet: hear it, loop it, slow it. */
export function TrialDesk({ trial, onSelection, onLength, isCovered, actions }: TrialDeskProps) {
  const sound = useTrialSound(trial)
  const tellLength = useLatest(onLength)
  useEffect(() => {
    if (sound.durationSec > 0) tellLength.current(sound.durationSec)
  }, [sound.durationSec, tellLength])
  useEffect(() => {
    if (isCovered) sound.player?.pause()
  }, [isCovered, sound.player])
  return (
    <div className="flex w-full flex-1 flex-col gap-4 px-3 pt-3 sm:px-5">
      <title>{`${trial.file.name} · Plumbline`}</title>
      <header className="flex flex-wrap items-start justify-between gap-x-6 gap-y-3">
        <div className="min-w-0">
          <h1 className="text-xl font-semibold break-words">{trial.file.name}</h1>
          <p className="mt-1 max-w-prose text-pencil">
            In this browser only: nothing has been sent. Keep it to lay bars and chords under it, and to show it to
            others.
          </p>
        </div>
        <div className="flex flex-wrap gap-3">{actions}</div>
      </header>
      {sound.state === 'opening' ? (
        <p role="status" className="text-pencil">
          Opening the recording …
        </p>
      ) : null}
      {sound.state === 'unplayable' ? (
        <Notice kind="fault" title="This browser cannot play this file">
          It may be of a kind the browser does not know, aiff for one, or no recording at all. Keep it, and it is read
          on the server, which knows more kinds; or choose another file.
        </Notice>
      ) : null}
      {sound.player ? <Lanes player={sound.player} sound={sound} onSelection={onSelection} /> : null}
    </div>
  )
}

function Lanes({
  player,
  sound,
  onSelection
}: { player: Player; sound: TrialSound } & Pick<TrialDeskProps, 'onSelection'>) {
  const { durationSec } = sound
  const timeline = useRef<TimelineHandle>(null)
  const foot = useRef<HTMLDivElement>(null)
  const [selection, setSelection] = useState<Span | null>(null)
  const [isFollowing, setFollowing] = useState(true)
  const [isKeySheetOpen, setKeySheetOpen] = useState(false)
  const [areKeysOff, setKeysOff] = useState(false)
  const [isBlocked, setBlocked] = useState(false)
  const [fault, setFault] = useState<string | null>(null)
  const [volume, setVolume] = useState(player.volume)
  const [topHz, setTopHz] = useState(plainAids.lowFocus.topHz)
  const listening = useAids(player, { topHz, onTopHz: setTopHz })
  const manner = useLoopManner(player, null)
  const tapping = useTapTempo(noTempo)
  const controls = soloControls(player, manner.ways)
  const setting = { barMap: null, durationSec }

  useScope(
    (scope) => {
      scope.add(player.on('blocked', () => setBlocked(true)))
      scope.add(
        player.on('state', (state) => {
          if (state === 'playing') setBlocked(false)
        })
      )
      scope.add(player.on('fault', ({ message }) => setFault(message)))
      const height = (px: number) => document.documentElement.style.setProperty('--foot', `${px}px`)
      if (foot.current)
        scope.observe(new ResizeObserver(([box]) => height(box?.target.clientHeight ?? 0)), foot.current)
      scope.add(() => document.documentElement.style.removeProperty('--foot'))
    },
    [player]
  )

  const select = (span: Span | null): void => {
    const kept = span && span.endSec > span.startSec ? span : null
    setSelection(kept)
    onSelection(kept)
    if (player.loop) controls.setLoop(kept)
  }
  const seek = (sec: Sec): void => {
    player.seek(sec)
    timeline.current?.show(sec)
  }
  const step = (size: Sec) => seek(Math.max(0, Math.min(durationSec, player.heardPosition + size)))
  const playPause = () => (player.state === 'playing' ? player.pause() : void player.play())
  const againBefore = () => {
    seek(placeBefore(null, player.heardPosition, 2))
    if (player.state !== 'playing') void player.play()
  }
  const setRate = (rate: number) => controls.setRate(Math.max(rateLimits.min, Math.min(rateLimits.max, rate)))
  const percent = () => Math.round(player.rate * 100)
  const mark = (edge: 'start' | 'end') => {
    const now = player.heardPosition
    const span =
      edge === 'start'
        ? { startSec: now, endSec: selection?.endSec ?? durationSec }
        : { startSec: selection?.startSec ?? 0, endSec: now }
    if (span.endSec > span.startSec) select(span)
  }

  useTransportKeys(
    {
      playPause,
      backBar: () => step(-barlessStepSec),
      onBar: () => step(barlessStepSec),
      backBeat: () => seek(nudgeSec(player.heardPosition, 'none', -1, setting)),
      onBeat: () => seek(nudgeSec(player.heardPosition, 'none', 1, setting)),
      toStart: () => seek(player.loop?.span.startSec ?? 0),
      loop: () => controls.setLoop(player.loop ? null : selection),
      loopStart: () => mark('start'),
      loopEnd: () => mark('end'),
      slower: () => setRate((percent() - 5) / 100),
      faster: () => setRate((percent() + 5) / 100),
      fullSpeed: () => setRate(1),
      againBefore,
      tapTempo: tapping.tap,
      ...(listening.can.pitch
        ? {
            pitchUp: () => listening.setSemitones(player.semitones + 1),
            pitchDown: () => listening.setSemitones(player.semitones - 1)
          }
        : {}),
      ...(listening.can.aids
        ? {
            octaveUp: () => listening.setOctaveUp(!player.aids.isOctaveUp),
            lowFocus: () => listening.setLowFocus(!player.aids.lowFocus.isOn)
          }
        : {}),
      zoomIn: () => timeline.current?.zoom(1),
      zoomOut: () => timeline.current?.zoom(-1),
      follow: () => setFollowing(!isFollowing),
      keySheet: () => setKeySheetOpen(true)
    },
    { isOff: areKeysOff }
  )

  return (
    <>
      {fault ? <Notice kind="fault">{fault}</Notice> : null}
      <div className="border border-rule bg-sheet px-3 py-3 sm:px-4">
        <Timeline
          ref={timeline}
          player={player}
          durationSec={durationSec}
          peaks={sound.peaks}
          barMap={null}
          spans={noSpans}
          selection={selection}
          onSelect={select}
          snap="none"
          onSnap={ignore}
          isFollowing={isFollowing}
          onFollow={setFollowing}
          onSeek={seek}
          valueText={(sec) => spokenTime(sec)}
        />
        <p role="status" className="text-sm text-pencil">
          {isBlocked ? 'Press play to hear it.' : soundWords[sound.state]}
        </p>
      </div>
      <div ref={foot} className="sticky bottom-0 z-10 -mx-3 mt-auto sm:-mx-5">
        <TransportBar
          player={player}
          commands={{
            playPause,
            setRate,
            setLoop: controls.setLoop,
            nudge: (direction) => step(direction * barlessStepSec),
            againBefore
          }}
          selection={selection}
          spanWords={({ startSec, endSec }) => `${timeWords(startSec)} to ${timeWords(endSec)}`}
          tempoNow={noTempo}
          listening={listening}
          manner={manner}
          tapping={tapping}
          volume={volume}
          onVolume={(next) => {
            setVolume(next)
            player.setVolume(next)
          }}
          onKeySheet={() => setKeySheetOpen(true)}
        />
      </div>
      {isKeySheetOpen ? (
        <KeySheet map={defaultKeyMap} areOff={areKeysOff} onOff={setKeysOff} onClose={() => setKeySheetOpen(false)} />
      ) : null}
    </>
  )
}

/** Without bars the step of a bar is two seconds: a bar of four at 120. */
const barlessStepSec = 2
const noSpans: never[] = []
const ignore = () => undefined
const noTempo = () => null
const soundWords: Record<TrialSound['state'], string> = {
  opening: '',
  drawing: 'Drawing the waveform …',
  drawn: '',
  undrawn: 'Too long to draw here: it plays all the same, and is drawn when it is kept.',
  unplayable: ''
}
