import { useRef, useState, type ReactNode } from 'react'
import { useNarrow } from '@client/lib/use-narrow'
import { Button } from '@client/ui/button'
import { Toolbar } from '@client/ui/toolbar'
import type { Span } from '@shared/timing/types'
import { aidsWords } from './aids-words'
import { ClickPart, type ClickControls } from './click-part'
import { defaultKeyMap, type KeyBinding } from './keys'
import { lackWords } from './lack-words'
import { LadderPart } from './ladder-part'
import { ListeningPart, OctaveSwitch } from './listening-part'
import { LoopPart } from './loop-part'
import { LoopWords } from './loop-words'
import { Part } from './part'
import { PlaceClock } from './place-clock'
import type { Player } from './player'
import { PracticeSheet } from './practice-sheet'
import { SpeedSlider } from './speed-slider'
import { AgainButton, keysOf, KeysButton, StartButtons, TapButton } from './transport-buttons'
import type { TransportCommands } from './transport-commands'
import type { AidsControls } from './use-aids'
import type { LoopMannerControls } from './use-loop-manner'
import { usePlayer } from './use-player'
import type { TapTempoControls } from './use-tap-tempo'
import { SafeListening, VolumeSlider, type VolumeProps } from './volume'

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

/** With every choice that may be left out made. */
export type BarProps = TransportBarProps & {
  isShared: boolean
  keyMap: readonly KeyBinding[]
  /** Passes done; counted where it outlives a change of width. */
  turns: number
}

const phonePx = 640

/** What always stands under the desk: the sound, and how it is practised with. */
export function TransportBar({ isShared = false, keyMap = defaultKeyMap, ...given }: TransportBarProps) {
  const { turns } = usePlayer(given.player)
  const props: BarProps = { ...given, isShared, keyMap, turns }
  const isPhone = useNarrow(phonePx)
  return (
    <section
      aria-label="Transport"
      data-ledge={isPhone ? undefined : true}
      className="border border-rule bg-sheet px-3 py-2 sm:px-4"
    >
      {isPhone ? (
        <PhoneBar {...props} />
      ) : (
        <Toolbar label="Transport">
          <DeskRows {...props} />
        </Toolbar>
      )}
      <QuietLine {...props} />
    </section>
  )
}

function DeskRows(props: BarProps) {
  const { player, commands, click, tapping, keyMap } = props
  const { rate, capabilities } = usePlayer(player)
  return (
    <div className="grid w-full min-w-0 gap-2">
      <div className="flex min-w-0 flex-wrap items-center gap-x-4 gap-y-1 xl:gap-x-6">
        <StartButtons player={player} commands={commands} keyMap={keyMap} />
        <PlaceClock player={player} />
        <Loop {...props} />
        <div className="max-w-60 min-w-48 flex-1">
          <SpeedSlider rate={rate} tempoNow={props.tempoNow} onRate={commands.setRate} />
        </div>
        <TapButton onTap={tapping.tap} keyMap={keyMap} />
        <div className="ml-auto flex flex-none items-center gap-2 lg:gap-3">
          <div className="w-24 xl:w-28">
            <VolumeSlider volume={props.volume} onVolume={props.onVolume} />
          </div>
          <SafeListening />
          <KeysButton onKeySheet={props.onKeySheet} />
        </div>
      </div>
      <div className="flex min-w-0 flex-wrap items-start gap-x-6 gap-y-1 border-t border-rule pt-1.5 text-sm xl:gap-x-9 xl:text-base">
        <ListeningPart listening={props.listening} />
        {click ? <ClickPart click={click} /> : null}
        <LadderPart manner={props.manner} isShared={props.isShared} />
        <Part label="Again from">
          <AgainButton player={player} commands={commands} keyMap={keyMap} />
        </Part>
        <LoopPart manner={props.manner} canRest={capabilities.clicks} isShared={props.isShared} kept={props.kept} />
      </div>
    </div>
  )
}

/** The essentials in two rows, the rest above them behind one button. */
function PhoneBar(props: BarProps) {
  const { player, commands, keyMap } = props
  const { rate, aids, semitones } = usePlayer(player)
  const [isOpen, setOpen] = useState(false)
  const practice = useRef<HTMLButtonElement>(null)
  const words = aidsWords(aids, semitones)
  return (
    <>
      {isOpen ? (
        <PracticeSheet
          {...props}
          onClose={() => {
            setOpen(false)
            practice.current?.focus()
          }}
        />
      ) : null}
      <Toolbar label="Transport">
        <div className="grid w-full min-w-0 gap-1.5">
          <div className="flex min-w-0 items-center gap-x-3">
            <StartButtons player={player} commands={commands} keyMap={keyMap} />
            <PlaceClock player={player} />
            <Loop {...props} isShort />
          </div>
          <div className="flex min-w-0 items-center gap-x-3">
            <div className="min-w-0 flex-1">
              <SpeedSlider rate={rate} tempoNow={props.tempoNow} isShort onRate={commands.setRate} />
            </div>
            <div className="flex-none text-sm">
              <OctaveSwitch {...props.listening} />
            </div>
            <Button ref={practice} aria-expanded={isOpen} onClick={() => setOpen(!isOpen)}>
              Practice
            </Button>
          </div>
          {words ? <p className="truncate text-sm text-pencil">{words}</p> : null}
        </div>
      </Toolbar>
    </>
  )
}

function Loop(props: BarProps & { isShort?: boolean }) {
  const { player, commands, selection, spanWords, keyMap, turns, isShort = false } = props
  const { loop, rate } = usePlayer(player)
  const span = loop?.span ?? selection
  return (
    <LoopWords
      words={span ? spanWords(span) : null}
      isOn={loop !== null}
      turns={turns}
      percent={loop?.ladder && !isShort ? Math.round(rate * 100) : null}
      keys={keysOf(keyMap, 'loop')}
      onToggle={() => commands.setLoop(loop ? null : selection)}
    />
  )
}

/** Under the bar: what the taps say, what is still wanting, what cannot be done here. */
function QuietLine({ player, tapping, manner, missing, isShared }: BarProps) {
  const { capabilities, loop } = usePlayer(player)
  const wants = manner.isLadderOn && !loop && !isShared ? 'It gets faster as soon as a loop is on.' : null
  const said = [tapping.words, wants, missing ?? lackWords(capabilities)].filter((words) => words !== null)
  return (
    <div role="status">
      {said.map((words) => (
        <p key={words} className="pt-1 text-sm text-pencil">
          {words}
        </p>
      ))}
    </div>
  )
}
