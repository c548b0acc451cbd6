// The bars of a take, laid and corrected by hand, under the timeline. No drag is needed for anything (WCAG 2.2, 2.5.7).
import { useId, useState, type ReactNode } from 'react'
import type { BarMap } from '@shared/timing/bar-map'
import { timeWords } from '@shared/timing/time-words'
import type { BarMapBody } from '@shared/timing/types'
import type { BarIndex } from '@shared/units'
import { writeMeter } from '@shared/timing/meter'
import { handleUndoKey } from '@client/lib/undo-keys'
import { Button } from '@client/ui/button'
import { Empty } from '@client/ui/empty'
import { IconButton } from '@client/ui/icon-button'
import { Notice } from '@client/ui/notice'
import { Sentence, SentenceNumber } from '@client/ui/sentence'
import { Tabs } from '@client/ui/tabs'
import { CountTools } from '@client/features/bar-maps/count-tools'
import type { BarEditorProps } from '@client/features/bar-maps/editor-props'
import { FormTools } from '@client/features/bar-maps/form-tools'
import { LineTools } from '@client/features/bar-maps/line-tools'
import { SteadyBars } from '@client/features/bar-maps/steady-bars'
import { RefusedBars } from '@client/features/bar-maps/refused-bars'
import { TapPanel } from '@client/features/bar-maps/tap-panel'
import { usePlayhead } from '@client/transport/use-playhead'

type Part = 'tap' | 'line' | 'count' | 'form'

export function BarEditor(props: BarEditorProps) {
  const { document, edits, durationSec, onClose } = props
  const { body, barMap } = document
  const id = useId()
  return (
    // Undo and redo from the keyboard wherever the focus is in the panel; the controls are the buttons.
    // oxlint-disable-next-line jsx-a11y/no-noninteractive-element-interactions
    <section
      aria-labelledby={id}
      className="grid min-w-0 gap-3 border-t border-rule bg-sheet px-4 py-3 sm:px-5"
      onKeyDown={(event) => handleUndoKey(event, document)}
    >
      <header className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1">
        <h2 id={id} className="text-base font-semibold">
          Bars
          <span className="font-normal text-pencil"> · {body ? barsWords(barMap, durationSec) : 'being fetched'}</span>
        </h2>
        <div className="flex items-center gap-1">
          <IconButton
            icon="undo"
            label="Undo the last change of the bars"
            keys="Ctrl Z"
            disabled={!document.canUndo}
            onClick={() => void document.undo()}
          />
          <IconButton
            icon="redo"
            label="Do it again"
            keys="Ctrl Shift Z"
            disabled={!document.canRedo}
            onClick={() => void document.redo()}
          />
          <IconButton icon="close" label="Close the bars" onClick={onClose} />
        </div>
      </header>
      <RefusedBars document={document} />
      {edits.fault ? (
        <Notice kind="fault" next={<Button onClick={edits.clearFault}>I see</Button>}>
          {edits.fault}
        </Notice>
      ) : null}
      {body ? <Parts {...props} body={body} /> : null}
    </section>
  )
}

function Parts(props: BarEditorProps & { body: BarMapBody }) {
  const { document, body, bar, onBar, player, controls } = props
  const { barMap } = document
  const [part, setPart] = useState<Part>('tap')
  const playheadSec = usePlayhead(player)
  if (!barMap)
    return (
      <>
        <Empty
          says="No bars yet."
          how="Tap along while it plays. Or, if it keeps its tempo, say how fast it is and where bar 1 begins."
        />
        <TapPanel {...props} body={body} />
        <div className="border-t border-rule pt-3">
          <SteadyBars {...props} body={body} playheadSec={playheadSec} />
        </div>
      </>
    )
  const chosen = bar ?? barMap.barAt(playheadSec)
  const tools = { ...props, body, barMap, bar: chosen, playheadSec }
  const withBar = (panel: ReactNode) => (
    <div className="grid gap-2">
      <BarStepper barMap={barMap} bar={chosen} onBar={onBar} onGo={() => controls.seek(barMap.barSec(chosen))} />
      {panel}
    </div>
  )
  return (
    <Tabs<Part>
      label="Ways to change the bars"
      chosen={part}
      onChoose={setPart}
      tabs={[
        { key: 'tap', label: 'Tap along', panel: <TapPanel {...props} body={body} /> },
        { key: 'line', label: 'One line', panel: withBar(<LineTools {...tools} />) },
        { key: 'count', label: 'Counting', panel: withBar(<CountTools {...tools} />) },
        { key: 'form', label: 'Form', panel: withBar(<FormTools {...tools} />) }
      ]}
    />
  )
}

interface BarStepperProps {
  barMap: BarMap
  bar: BarIndex
  onBar(bar: BarIndex): void
  onGo(): void
}

function BarStepper({ barMap, bar, onBar, onGo }: BarStepperProps) {
  return (
    <div className="flex flex-wrap items-center gap-x-2 gap-y-1">
      <IconButton icon="arrowLeft" label="The bar before" onClick={() => onBar(bar - 1)} />
      <Sentence label="Chosen bar">
        {'Bar '}
        <SentenceNumber
          label="chosen bar"
          min={-999}
          max={9999}
          value={bar}
          onChange={(next) => onBar(Math.round(next))}
        />
      </Sentence>
      <IconButton icon="arrowRight" label="The next bar" onClick={() => onBar(bar + 1)} />
      <span className="text-pencil">
        begins at {timeWords(barMap.barSec(bar))}, in {writeMeter(barMap.meterAt(bar))}
      </span>
      <Button look="quiet" onClick={onGo}>
        Go there
      </Button>
    </div>
  )
}

const barsWords = (barMap: BarMap | null, durationSec: number): string => {
  if (!barMap) return 'none yet'
  const { firstBar, lastBar } = barMap.barRange(durationSec)
  const tempo = Math.round(barMap.tempoAt(durationSec / 2))
  return `${lastBar - Math.max(1, firstBar) + 1} bars, about ${tempo} beats a minute`
}
