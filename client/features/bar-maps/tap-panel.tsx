import { useMemo, useState, type KeyboardEvent } from 'react'
import { createBarGrid } from '@shared/timing/bar-grid'
import { tapModes, type TapMode } from '@shared/timing/taps'
import type { BarMapBody, Position } from '@shared/timing/types'
import { timeWords } from '@shared/timing/time-words'
import { freshId } from '@client/lib/ids'
import { useScope } from '@client/lib/scope'
import { useLatest } from '@client/lib/use-latest'
import { isWriting } from '@client/transport/keys'
import { Button } from '@client/ui/button'
import { Dialog } from '@client/ui/dialog'
import { Figures } from '@client/ui/figures'
import { RadioGroup } from '@client/ui/radio-group'
import type { BarEditorProps } from '@client/features/bar-maps/editor-props'
import { LagExercise, lagWords } from '@client/features/bar-maps/lag-exercise'
import { metersFor, planTaps, type Rest } from '@client/features/bar-maps/lay-bars'
import { TapLook } from '@client/features/bar-maps/tap-look'
import { eventAgeSec, TapPad } from '@client/features/bar-maps/tap-pad'
import { lagAgainst, likelyStart, tempoOfTaps } from '@client/features/bar-maps/tap-reckoning'
import { useTapping } from '@client/features/bar-maps/use-tapping'

export type TapPanelProps = Pick<
  BarEditorProps,
  'document' | 'player' | 'controls' | 'durationSec' | 'tune' | 'selection' | 'tapLagMs' | 'onTapLag' | 'onPreview'
> & { body: BarMapBody }

/** Tapping along: choose what is tapped, tap while it plays, look at the bars, keep them. */
export function TapPanel(props: TapPanelProps) {
  const { body, document, player, controls, durationSec, tune, selection, tapLagMs, onTapLag, onPreview } = props
  const meters = metersFor(body, tune)
  const meter = createBarGrid(meters).meterAt(1)
  const modes = tapModes(meters)
  const [wish, setMode] = useState<TapMode>('every beat')
  const mode = modes.includes(wish) ? wish : 'every beat'
  const [speed, setSpeed] = useState<'1' | '0.5'>('1')
  const [chosenStart, setStart] = useState<Position | null>(null)
  const [rest, setRest] = useState<Rest>('keep')
  const [isLearning, setLearning] = useState(false)
  const tapping = useTapping({ player, controls, from: selection })
  const { phase, taps, rate } = tapping
  const lagSec = (tapLagMs ?? 0) / 1000

  const firstTap = taps[0]
  const start =
    chosenStart ??
    likelyStart(firstTap === undefined ? undefined : firstTap - lagSec * rate, mode, meters, document.barMap)
  const input = useSame({ body, tune, durationSec, mode, rate, lagSec, start, rest })
  const plan = useMemo(
    () => (phase === 'looking' ? planTaps({ ...input, taps, newId: freshId }) : null),
    [phase, input, taps]
  )
  const preview = useLatest(onPreview)
  const drawn = plan?.ok ? plan.value.body : null
  useScope(
    (scope) => {
      if (!drawn) return
      preview.current(drawn)
      scope.add(() => preview.current(null))
    },
    [drawn, preview]
  )
  // Leaving the panel while it plays ends the run.
  const run = useLatest(tapping)
  useScope(
    (scope) => {
      scope.add(() => {
        if (run.current.phase === 'tapping') run.current.reset()
      })
    },
    [run]
  )

  const handleStart = (): void => {
    setStart(null)
    setRest('keep')
    tapping.start(Number(speed))
  }
  const handleKey = (event: KeyboardEvent): void => {
    if (phase !== 'tapping' || event.ctrlKey || event.metaKey || event.altKey || isWriting(event.target)) return
    const key = event.key.toLowerCase()
    if (key !== 't' && key !== 'backspace') return
    event.preventDefault()
    if (event.repeat) return
    if (key === 't') tapping.tap(eventAgeSec(event.timeStamp, performance.now()))
    else tapping.takeBack()
  }
  const handleKeep = (): void => {
    if (!plan?.ok) return
    document.edit(plan.value.operations)
    tapping.reset()
  }
  const learned = phase === 'looking' ? lagAgainst(taps, document.barMap, mode, rate) : null
  const isNewLag = learned !== null && Math.abs(learned - (tapLagMs ?? 0)) > 10

  if (plan)
    return (
      <TapLook
        plan={plan}
        start={start}
        meter={meter}
        onStart={setStart}
        rest={rest}
        hasRest={hasBarsOutside(body, taps)}
        onRest={setRest}
        learned={isNewLag && learned !== null ? lagWords(learned) : null}
        onLearn={() => learned !== null && onTapLag(Math.round(learned))}
        onKeep={handleKeep}
        onAgain={tapping.reset}
      />
    )
  if (phase === 'tapping')
    return (
      // Keys count anywhere in the panel; the pad is the control.
      // oxlint-disable-next-line jsx-a11y/no-static-element-interactions
      <div className="grid gap-3" onKeyDown={handleKey}>
        <TapPad label={padWords(mode)} onTap={tapping.tap} />
        <div className="flex flex-wrap items-center justify-between gap-3">
          <TapCount count={taps.length} tempo={tempoOfTaps(taps, mode, meters)} />
          <div className="flex flex-wrap gap-2">
            <Button icon="undo" disabled={taps.length === 0} onClick={tapping.takeBack}>
              Take the last tap back
            </Button>
            <Button look="primary" onClick={tapping.stop}>
              Stop and look
            </Button>
          </div>
        </div>
        <p className="text-sm text-pencil">
          T or the space bar taps, Backspace takes the last tap back. Go on as long as you like; a beat left out is no
          harm.
        </p>
      </div>
    )
  return (
    <div className="grid gap-4">
      <div className="grid gap-x-8 gap-y-3 sm:grid-cols-2">
        <RadioGroup<TapMode>
          legend="Tap on"
          inline
          value={mode}
          onChange={setMode}
          choices={modes.map((value) => ({ value, label: value }))}
        />
        <RadioGroup<'1' | '0.5'>
          legend="While it plays at"
          inline
          value={speed}
          onChange={setSpeed}
          choices={[
            { value: '1', label: 'full speed' },
            { value: '0.5', label: 'half speed' }
          ]}
        />
      </div>
      <div className="flex flex-wrap items-center gap-x-4 gap-y-2">
        <Button look="primary" icon="tap" onClick={handleStart}>
          Play and tap
        </Button>
        <span className="text-sm text-pencil">
          {selection
            ? `It plays from the start of the selection, ${timeWords(selection.startSec)}.`
            : 'It plays from the playhead. Let a bar go by, then tap.'}
        </span>
      </div>
      <div className="flex flex-wrap items-center gap-x-3 gap-y-1 text-sm text-pencil">
        <span>
          {tapLagMs === null
            ? 'How late your taps come is not known yet; every hand, key and loudspeaker adds a little.'
            : `You tap ${lagWords(tapLagMs)}; that is taken off.`}
        </span>
        <Button look="quiet" onClick={() => setLearning(true)}>
          {tapLagMs === null ? 'Learn my lag' : 'Learn it again'}
        </Button>
      </div>
      {isLearning ? (
        <Dialog title="Learn my lag" onClose={() => setLearning(false)}>
          <div className="pb-4">
            <LagExercise onLearned={onTapLag} onClose={() => setLearning(false)} />
          </div>
        </Dialog>
      ) : null}
    </div>
  )
}

/** The same object as long as it says the same: a preview that draws the desk anew must not lead to another preview. */
const useSame = <T,>(value: T): T => {
  const said = JSON.stringify(value)
  return useMemo(() => JSON.parse(said) as T, [said])
}

const padWords = (mode: TapMode): string => (mode === 'bar lines' ? 'Tap on every bar line' : `Tap on ${mode}`)

/** A place before the first tap or after the last one, by more than the hand's own jitter. */
const hasBarsOutside = ({ anchors }: BarMapBody, taps: readonly number[]): boolean => {
  const [first, last] = [taps[0], taps.at(-1)]
  if (first === undefined || last === undefined) return false
  return anchors.some(({ sec }) => sec < first - 0.1 || sec > last + 0.1)
}

function TapCount({ count, tempo }: { count: number; tempo: number | null }) {
  return (
    <p>
      <Figures>{count}</Figures> {count === 1 ? 'tap' : 'taps'}
      {tempo === null ? null : (
        <span className="text-pencil">
          {' · about '}
          <Figures>{Math.round(tempo)}</Figures>
          {' beats a minute'}
        </span>
      )}
    </p>
  )
}
