import type { ReactNode } from 'react'
import { useNarrow } from '@client/lib/use-narrow'
import { IconButton } from '@client/ui/icon-button'
import { Toolbar } from '@client/ui/toolbar'
import type { Span } from '@shared/timing/types'
import { aidsWords } from './aids-words'
import { ClickPart, type ClickControls } from './click-part'
import { LadderPart } from './ladder-part'
import { ListeningPart, OctaveSwitch } from './listening-part'
import { LoopPart } from './loop-part'
import { LoopWords } from './loop-words'
import { defaultKeyMap, type KeyBinding } from './keys'
import { lackWords } from './lack-words'
import { ActButton, Part } from './part'
import { PlaceClock } from './place-clock'
import type { Player } from './player'
import { PracticeSheet } from './practice-sheet'
import { SpeedSlider } from './speed-slider'
import type { AidsControls } from './use-aids'
import type { LoopMannerControls } from './use-loop-manner'
import { usePlayer } from './use-player'
import type { TapTempoControls } from './use-tap-tempo'
import { SafeListening, VolumeSlider, type VolumeProps } from './volume'

/** What the bar does; in a session that shares the transport these go through the session instead of the player. */
export interface TransportCommands {
  playPause: () => void
  setRate: (rate: number) => void
  setLoop: (span: Span | null) => void
  /** A bar back or on; tenths of a second without bars. */
  nudge: (direction: 1 | -1) => void
  /** From two bars before where the line is, and sounding. */
  againBefore: () => void
}

export interface TransportBarProps extends VolumeProps {
  player: Player
  commands: TransportCommands
  selection: Span | null
  /** "bars 17 to 20". */
  spanWords: (span: Span) => string
  /** Felt beats a minute at full speed where the line is; null without a bar map. */
  tempoNow: () => number | null
  listening: AidsControls
  manner: LoopMannerControls
  tapping: TapTempoControls
  /** Absent where bars can never be laid. */
  click?: ClickControls
  /** The loops one keeps; absent where nothing can be kept. */
  kept?: ReactNode
  /** Others hear the same: loop and speed are everybody's. */
  isShared?: boolean
  /** What this browser or address cannot do, in words. */
  missing?: string | null
  keyMap?: readonly KeyBinding[]
  onKeySheet: () => void
}

const phonePx = 640

/** What always stands under the desk: the sound, and how it is practised with. */
export function TransportBar(props: TransportBarProps) {
  const isPhone = useNarrow(phonePx)
  const { capabilities } = usePlayer(props.player)
  const lacks = props.missing ?? lackWords(capabilities)
  const said = [props.tapping.words, lacks].filter(Boolean)
  return (
    <section aria-label="Transport" className="border border-rule bg-sheet px-3 py-2 sm:px-4">
      <Toolbar label="Transport">{isPhone ? <PhoneRows {...props} /> : <DeskRows {...props} />}</Toolbar>
      <div role="status">
        {said.map((words) => (
          <p key={words} className="pt-1 text-sm text-pencil">
            {words}
          </p>
        ))}
      </div>
    </section>
  )
}

function DeskRows(props: TransportBarProps) {
  const { player, commands, listening, manner, click, kept, isShared = false } = props
  const { rate, state, capabilities } = usePlayer(player)
  return (
    <div className="grid w-full min-w-0 gap-2">
      <div className="flex min-w-0 items-center gap-x-4 xl:gap-x-6">
        <StartButtons {...props} />
        <PlaceClock player={player} />
        <Loop {...props} />
        <div className="max-w-60 min-w-32 flex-1">
          <SpeedSlider rate={rate} tempoNow={props.tempoNow} onRate={commands.setRate} />
        </div>
        <TapButton {...props} />
        <div className="ml-auto flex flex-none items-center gap-2 lg:gap-3">
          <div className="w-20 lg:w-28">
            <VolumeSlider volume={props.volume} onVolume={props.onVolume} />
          </div>
          <SafeListening />
          <KeysButton onKeySheet={props.onKeySheet} />
        </div>
      </div>
      <div className="flex min-w-0 flex-wrap items-start gap-x-6 gap-y-1 border-t border-rule pt-1.5 xl:gap-x-9">
        <ListeningPart listening={listening} />
        {click ? <ClickPart click={click} /> : null}
        <LadderPart manner={manner} isShared={isShared} />
        <Part label="Again">
          <AgainButton {...props} isReady={state === 'ready' || state === 'playing'} />
        </Part>
        <LoopPart manner={manner} canRest={capabilities.clicks} isShared={isShared} kept={kept} />
      </div>
    </div>
  )
}

/** The essentials in two rows, the rest behind one button. */
function PhoneRows(props: TransportBarProps) {
  const { player, commands, listening } = props
  const { rate, aids, semitones } = usePlayer(player)
  const words = aidsWords(aids, semitones)
  return (
    <div className="grid w-full min-w-0 gap-1.5">
      <div className="flex min-w-0 items-center gap-x-3">
        <StartButtons {...props} />
        <PlaceClock player={player} />
        <Loop {...props} />
      </div>
      <div className="flex min-w-0 items-center gap-x-3">
        <div className="min-w-0 flex-1">
          <SpeedSlider rate={rate} tempoNow={props.tempoNow} onRate={commands.setRate} />
        </div>
        <div className="flex-none">
          <OctaveSwitch {...listening} />
        </div>
        <PracticeSheet
          {...props}
          tapButton={<TapButton {...props} />}
          againButton={<AgainButton {...props} isReady />}
          keysButton={<KeysButton onKeySheet={props.onKeySheet} />}
        />
      </div>
      {words ? <p className="truncate text-sm text-pencil">{words}</p> : null}
    </div>
  )
}

function StartButtons({ player, commands, keyMap = defaultKeyMap }: TransportBarProps) {
  const { state } = usePlayer(player)
  const isPlaying = state === 'playing'
  const isReady = state === 'ready' || isPlaying
  return (
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
  )
}

function Loop({ player, commands, selection, spanWords, keyMap = defaultKeyMap }: TransportBarProps) {
  const { loop, rate, turns } = usePlayer(player)
  const span = loop?.span ?? selection
  return (
    <LoopWords
      words={span ? spanWords(span) : null}
      isOn={loop !== null}
      turns={turns}
      percent={loop?.ladder ? Math.round(rate * 100) : null}
      keys={keysOf(keyMap, 'loop')}
      onToggle={() => commands.setLoop(loop ? null : selection)}
    />
  )
}

const AgainButton = ({ commands, keyMap = defaultKeyMap, isReady }: TransportBarProps & { isReady: boolean }) => (
  <ActButton
    disabled={!isReady}
    aria-label="Again from two bars before"
    aria-keyshortcuts={keysOf(keyMap, 'againBefore')}
    onClick={commands.againBefore}
  >
    from two bars before
  </ActButton>
)

const TapButton = ({ tapping, keyMap = defaultKeyMap }: TransportBarProps) => (
  <ActButton aria-label="Tap the tempo" aria-keyshortcuts={keysOf(keyMap, 'tapTempo')} onClick={tapping.tap}>
    tap
  </ActButton>
)

const KeysButton = ({ onKeySheet }: Pick<TransportBarProps, 'onKeySheet'>) => (
  <button
    type="button"
    aria-label="Keys and pedals"
    aria-haspopup="dialog"
    aria-keyshortcuts="?"
    className="min-h-8 min-w-8 rounded px-1 text-sm whitespace-nowrap text-pencil hover:bg-wash hover:text-ink sm:px-2"
    onClick={onKeySheet}
  >
    ? keys
  </button>
)

const keysOf = (map: readonly KeyBinding[], action: KeyBinding['action']): string | undefined =>
  map.find((binding) => binding.action === action)?.keys[0]
