import { useRef, useState, type ReactNode } from 'react'
import { useScope } from '@client/lib/scope'
import { IconButton } from '@client/ui/icon-button'
import { Popover } from '@client/ui/popover'
import { Slider } from '@client/ui/slider'
import { Toolbar } from '@client/ui/toolbar'
import { ordinal } from '@shared/music/ordinal'
import { timeWords } from '@shared/timing/time-words'
import type { Span } from '@shared/timing/types'
import { hearingNote } from './hearing'
import { KeySheet } from './key-sheet'
import { defaultKeyMap, type KeyBinding } from './keys'
import { rateLimits, type Player } from './player'
import { usePlayer } from './use-player'

/** What the bar does; in a session that shares the transport these go through the session instead of the player. */
export interface TransportCommands {
  playPause: () => void
  setRate: (rate: number) => void
  setLoop: (span: Span | null) => void
  /** A bar back or on; tenths of a second without bars. */
  nudge: (direction: 1 | -1) => void
}

export interface TransportBarProps {
  player: Player
  commands: TransportCommands
  selection: Span | null
  /** "bars 17 to 20". */
  spanWords: (span: Span) => string
  /** Felt beats a minute at full speed where the line is; null without a bar map. */
  tempoNow: () => number | null
  onVolume: (volume: number) => void
  keyMap?: readonly KeyBinding[]
  areKeysOff?: boolean
  onKeysOff?: (areOff: boolean) => void
  isKeySheetOpen: boolean
  onKeySheet: (isOpen: boolean) => void
  /** Stands in the bar's middle: what a session adds. */
  children?: ReactNode
}

/** Play, loop, speed, place, volume: what always stands under the desk. */
export function TransportBar(props: TransportBarProps) {
  const { player, commands, selection, spanWords, keyMap = defaultKeyMap } = props
  const { state, rate, loop, turns } = usePlayer(player)
  const isPlaying = state === 'playing'
  const isReady = state === 'ready' || isPlaying
  const percent = Math.round(rate * 100)
  const span = loop?.span ?? selection

  return (
    <section aria-label="Transport" className="border border-rule bg-sheet px-3 py-2 sm:px-4">
      <Toolbar label="Transport">
        <div className="flex w-full min-w-0 flex-wrap items-center gap-x-3 gap-y-2 sm:gap-x-6">
          <div className="flex flex-none items-center gap-1 sm:gap-1.5">
            <IconButton
              icon="stepBack"
              label="Back a bar"
              keys={keysOf(keyMap, 'backBar')}
              disabled={!isReady}
              onClick={() => commands.nudge(-1)}
            />
            <IconButton
              look="round"
              icon={isPlaying ? 'pause' : 'play'}
              label={isPlaying ? 'Pause' : state === 'loading' ? 'Play when it is loaded' : 'Play'}
              keys={keysOf(keyMap, 'playPause')}
              disabled={state === 'empty'}
              onClick={commands.playPause}
            />
            <IconButton
              icon="stepForward"
              label="On a bar"
              keys={keysOf(keyMap, 'onBar')}
              disabled={!isReady}
              onClick={() => commands.nudge(1)}
            />
          </div>
          <Place player={player} />
          <LoopWords
            words={span ? spanWords(span) : null}
            isOn={loop !== null}
            turns={turns}
            onToggle={() => commands.setLoop(loop ? null : selection)}
          />
          <div className="flex min-w-0 basis-full items-center gap-x-2 sm:flex-1 sm:basis-auto sm:gap-x-6">
            <div className="min-w-0 flex-1 sm:max-w-56">
              <Slider
                label="Speed"
                says={speedWords(percent, props.tempoNow())}
                value={percent}
                min={rateLimits.min * 100}
                max={rateLimits.max * 100}
                step={1}
                bigStep={10}
                onChange={(value) => commands.setRate(value / 100)}
              />
            </div>
            {props.children}
            <div className="flex flex-none items-center gap-2 sm:ml-auto sm:gap-3">
              <Volume player={player} onVolume={props.onVolume} />
              <Hearing />
              <button
                type="button"
                aria-label="Keys and pedals"
                aria-haspopup="dialog"
                aria-keyshortcuts="?"
                className="min-h-8 min-w-8 rounded px-1 text-sm whitespace-nowrap text-pencil hover:bg-wash hover:text-ink sm:px-2"
                onClick={() => props.onKeySheet(true)}
              >
                ?<span className="hidden sm:inline"> keys</span>
              </button>
            </div>
          </div>
        </div>
      </Toolbar>
      {props.isKeySheetOpen ? (
        <KeySheet
          map={keyMap}
          areOff={props.areKeysOff ?? false}
          onOff={props.onKeysOff}
          onClose={() => props.onKeySheet(false)}
        />
      ) : null}
    </section>
  )
}

const keysOf = (map: readonly KeyBinding[], action: KeyBinding['action']): string | undefined =>
  map.find((binding) => binding.action === action)?.keys[0]

export const speedWords = (percent: number, tempo: number | null): string =>
  tempo === null ? `${percent} %` : `${percent} % · ${Math.round((tempo * percent) / 100)} beats a minute`

/** `m:ss.d`, written straight into the page ten times a second; nothing else draws while it runs. */
function Place({ player }: { player: Player }) {
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

function LoopWords(props: { words: string | null; isOn: boolean; turns: number; onToggle: () => void }) {
  const { words, isOn, turns } = props
  return (
    <button
      type="button"
      aria-pressed={isOn}
      disabled={words === null}
      aria-keyshortcuts="l"
      onClick={props.onToggle}
      className="grid min-h-9 min-w-0 flex-1 rounded text-left leading-tight not-disabled:hover:bg-wash sm:max-w-64 sm:min-w-44"
    >
      <span className="text-xs text-pencil">{isOn ? 'Loop' : words === null ? 'Loop' : 'Loop, off'}</span>
      {words === null ? (
        <span className="truncate text-pencil">select bars to loop them</span>
      ) : (
        <span className="truncate">
          {words}
          {isOn ? <span className="text-pencil"> · {ordinal(turns + 1)} time</span> : null}
        </span>
      )}
    </button>
  )
}

function Volume({ player, onVolume }: { player: Player; onVolume: (volume: number) => void }) {
  const [percent, setPercent] = useState(() => Math.round(player.volume * 100))
  return (
    <div className="w-16 sm:w-32">
      <Slider
        label="Volume"
        says={`${percent} %`}
        value={percent}
        min={0}
        max={100}
        step={1}
        onChange={(value) => {
          setPercent(value)
          onVolume(value / 100)
        }}
      />
    </div>
  )
}

/** The note that belongs beside every volume control. */
const Hearing = () => (
  <Popover
    label="Safe listening"
    align="end"
    renderTrigger={(trigger) => (
      <button
        {...trigger}
        type="button"
        aria-label="How loud, and how long?"
        className="min-h-8 rounded px-1 text-left text-xs leading-4 text-pencil underline decoration-dotted underline-offset-2 hover:text-ink"
      >
        how<span className="hidden sm:inline"> loud,</span>
        <br />
        <span className="hidden sm:inline">how long?</span>
        <span className="sm:hidden">loud?</span>
      </button>
    )}
  >
    {() => <p className="max-w-72 text-sm">{hearingNote}</p>}
  </Popover>
)
