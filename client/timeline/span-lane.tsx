import { memo, useMemo } from 'react'
import { cx } from '@client/ui/classes'
import { overlaps, scaleOf, visibleSpan } from './geometry'
import { Moving } from './moving'
import { crowdSpan, spanTargetPx, stackSpans, type Crowd, type Placed } from './stack-spans'
import type { CommentSpan } from './timeline-types'
import { useWindowView, type ViewStore } from './view-store'
import type { Span } from '@shared/timing/types'

export const spanRowPx = 26

export interface SpanLaneProps {
  store: ViewStore
  spans: readonly CommentSpan[]
  selectedId: string | null
  onSelect: (id: string) => void
  /** A crowd was pressed: look at it from nearer. */
  onLookNearer: (span: Span) => void
}

/** Comment spans as underlines with a hooked start and a letter. Only those in and near the view exist. */
export const SpanLane = memo(function SpanLane({ store, spans, selectedId, onSelect, onLookNearer }: SpanLaneProps) {
  const view = useWindowView(store)
  const scale = scaleOf(view)
  const placed = useMemo(() => stackSpans(spans, scale), [spans, scale])
  const shown = visibleSpan(view, view.widthPx / 2)
  return (
    <Moving store={store}>
      {placed
        .filter(isIn(shown))
        .map((sign) =>
          sign.kind === 'span' ? (
            <SpanSign key={sign.item.id} sign={sign} isSelected={sign.item.id === selectedId} onSelect={onSelect} />
          ) : (
            <CrowdSign key={`crowd-${sign.items[0]?.id}`} sign={sign} onLookNearer={onLookNearer} />
          )
        )}
    </Moving>
  )
})

const isIn =
  (shown: Span) =>
  (sign: Placed<CommentSpan> | Crowd<CommentSpan>): boolean =>
    overlaps(sign.kind === 'span' ? sign.item.span : crowdSpan(sign.items), shown)

function SpanSign(props: { sign: Placed<CommentSpan>; isSelected: boolean; onSelect: (id: string) => void }) {
  const { sign, isSelected, onSelect } = props
  const { item, x, width, row } = sign
  const weight = isSelected ? 'border-t-[3px]' : 'border-t-2'
  return (
    <button
      type="button"
      data-span={item.id}
      aria-label={`${item.letter}: ${item.label}`}
      aria-pressed={isSelected}
      title={item.label}
      onClick={() => onSelect(item.id)}
      className={cx('pointer-events-auto absolute text-left', item.isOpen ? 'text-claim' : 'text-pencil')}
      style={{ left: x, top: row * spanRowPx, width: Math.max(width, spanTargetPx), height: spanRowPx - 2 }}
    >
      <span className="absolute top-0 left-0 h-2 border-l-2 border-current" />
      <span
        className={cx('absolute top-1.5 left-0 border-current', weight, !item.isOpen && 'border-dashed')}
        style={{ width: Math.max(width, 12) }}
      />
      <span
        className={cx('absolute top-2.5 left-1.5 text-sm leading-none', isSelected ? 'font-semibold underline' : '')}
      >
        {item.letter}
      </span>
    </button>
  )
}

function CrowdSign({ sign, onLookNearer }: { sign: Crowd<CommentSpan>; onLookNearer: (span: Span) => void }) {
  const { items, x, width, row } = sign
  const open = items.filter(({ isOpen }) => isOpen).length
  const words = `${items.length} more comment${items.length === 1 ? '' : 's'}, ${open} open`
  return (
    <button
      type="button"
      aria-label={`${words}: look nearer`}
      title={words}
      onClick={() => onLookNearer(crowdSpan(items))}
      className={cx(
        'pointer-events-auto absolute border-t-2 border-dotted border-current text-center text-xs',
        open > 0 ? 'text-claim' : 'text-pencil'
      )}
      style={{ left: x, top: row * spanRowPx + 2, width, height: spanRowPx - 2 }}
    >
      +{items.length}
    </button>
  )
}
