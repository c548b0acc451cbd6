import { pulseOf, beatOfPulse, pulsesPerBar } from '@shared/timing/meter'
import { toNumber } from '@shared/timing/rational'
import type { OperationFault } from '@shared/documents/document'
import type { Result } from '@shared/result'
import type { Meter, Position } from '@shared/timing/types'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { Select } from '@client/ui/select'
import { Sentence, SentenceNumber } from '@client/ui/sentence'
import type { Rest, TapPlan } from '@client/features/bar-maps/lay-bars'

interface TapLookProps {
  plan: Result<TapPlan, OperationFault>
  start: Position
  meter: Meter
  onStart(start: Position): void
  rest: Rest
  /** Whether bars were laid outside the taps before. */
  hasRest: boolean
  onRest(rest: Rest): void
  /** Words for the lag these taps show against bars already laid; null when there is none to learn. */
  learned: string | null
  onLearn(): void
  onKeep(): void
  onAgain(): void
}

/** The tapped bars, drawn on the timeline and waiting for an answer. */
export function TapLook(props: TapLookProps) {
  const { plan, start, meter, onStart, rest, hasRest, onRest, learned, onLearn, onKeep, onAgain } = props
  const pulse = Math.round(toNumber(pulseOf(start, meter)))
  return (
    <div className="grid gap-3">
      {plan.ok ? (
        <p role="status">
          {fitWords(plan.value)} The bars above are drawn from them. Listen, then keep them or tap again.
        </p>
      ) : (
        <Notice kind="fault" title="These taps do not make bars yet">
          {plan.error.message}
        </Notice>
      )}
      <div className="flex flex-wrap gap-2">
        <Button look="primary" icon="tick" disabled={!plan.ok} onClick={onKeep}>
          Keep these bars
        </Button>
        <Button onClick={onAgain}>Tap again</Button>
      </div>
      <Sentence label="Where these taps start">
        {'These taps start at bar '}
        <SentenceNumber
          label="bar of the first tap"
          min={-999}
          max={9999}
          value={start.bar}
          onChange={(bar) => onStart({ ...start, bar: Math.round(bar) })}
        />
        {', beat '}
        <SentenceNumber
          label="beat of the first tap"
          min={1}
          max={pulsesPerBar(meter)}
          value={pulse}
          onChange={(beat) => onStart({ ...start, beat: beatOfPulse(Math.round(beat), meter) })}
        />
        {'.'}
      </Sentence>
      {hasRest ? (
        <div className="max-w-md">
          <Select<Rest>
            label="Bars already laid outside these taps"
            value={rest}
            onChange={onRest}
            choices={[
              { value: 'keep', label: 'stay' },
              { value: 'drop after', label: 'before them stay, after them are counted from the taps' },
              { value: 'drop all', label: 'go: only these taps count' }
            ]}
          />
        </div>
      ) : null}
      {learned ? (
        <div className="flex flex-wrap items-center gap-x-3 gap-y-1 text-sm text-pencil">
          <span>Against the bars laid here before, you tap {learned}.</span>
          <Button look="quiet" onClick={onLearn}>
            Take that off my taps
          </Button>
        </div>
      ) : null}
    </div>
  )
}

const counted = (count: number, one: string, many = `${one}s`): string => `${count} ${count === 1 ? one : many}`

const fitWords = ({ fit }: TapPlan): string => {
  const places = counted(fit.anchors.length, 'place')
  const left = fit.outliers.length > 0 ? `, ${counted(fit.outliers.length, 'tap')} set aside as slips` : ''
  return `${places} from your taps, which lie within ${Math.max(1, Math.round(fit.residualSec * 1000))} ms of them${left}.`
}
