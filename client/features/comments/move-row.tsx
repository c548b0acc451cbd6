import type { Span } from '@shared/timing/types'
import { IconButton } from '@client/ui/icon-button'
import { SmallButton } from './small-button'

export type SpanEdge = 'start' | 'end'

export interface MoveRowProps {
  span: Span
  selection: Span | null
  /** The span with one edge so many beats later (tenths of a second where there are no bars). */
  nudged: (span: Span, edge: SpanEdge, steps: number) => Span
  onMove: (span: Span) => void
  onDone: () => void
}

/** Moving what a comment is about, without dragging. */
export function MoveRow({ span, selection, nudged, onMove, onDone }: MoveRowProps) {
  const edge = (which: SpanEdge) => (
    <span className="inline-flex items-center text-sm text-pencil">
      {which}
      <IconButton
        icon="arrowLeft"
        label={`${which === 'start' ? 'Start' : 'End'} a beat earlier`}
        onClick={() => onMove(nudged(span, which, -1))}
      />
      <IconButton
        icon="arrowRight"
        label={`${which === 'start' ? 'Start' : 'End'} a beat later`}
        onClick={() => onMove(nudged(span, which, 1))}
      />
    </span>
  )
  return (
    <fieldset aria-label="Move what it is about" className="mt-1 flex flex-wrap items-center gap-x-3 gap-y-1">
      {edge('start')}
      {edge('end')}
      <SmallButton disabled={!selection} onClick={() => selection && onMove(selection)}>
        Use the selection
      </SmallButton>
      <SmallButton onClick={onDone}>Done</SmallButton>
    </fieldset>
  )
}
