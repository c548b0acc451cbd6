// Start and end of a span as two slider thumbs (APG multi-thumb slider): dragged, or moved by keys. The place without
// dragging is the row of nudge buttons (timeline-controls.tsx).
import { useRef, useState, type KeyboardEvent, type PointerEvent } from 'react'
import { cx } from '@client/ui/classes'
import type { Span } from '@shared/timing/types'
import type { Sec } from '@shared/units'
import { clamp, scaleOf, xToSec } from './geometry'
import { Moving } from './moving'
import { useWindowView, type ViewStore } from './view-store'

export type Edge = 'start' | 'end'

export interface EdgeThumbsProps {
  store: ViewStore
  span: Span
  /** "Selection", "Comment b". */
  name: string
  look: 'ink' | 'claim'
  snap: (sec: Sec) => Sec
  nudge: (sec: Sec, steps: number, isFine: boolean) => Sec
  valueText: (sec: Sec) => string
  /** While dragging: not kept yet. */
  onPreview: (span: Span | null) => void
  onCommit: (span: Span) => void
}

/** Fine steps of the keys, and the shortest span an edge can be pushed to. */
const shortestSec = 0.02

export const movedEdge = (span: Span, edge: Edge, sec: Sec, durationSec: Sec): Span =>
  edge === 'start'
    ? { ...span, startSec: clamp(sec, 0, span.endSec - shortestSec) }
    : { ...span, endSec: clamp(sec, span.startSec + shortestSec, durationSec) }

export function EdgeThumbs(props: EdgeThumbsProps) {
  return (
    <Moving store={props.store}>
      <Thumb {...props} edge="start" />
      <Thumb {...props} edge="end" />
    </Moving>
  )
}

function Thumb({ store, span, name, look, edge, ...props }: EdgeThumbsProps & { edge: Edge }) {
  const view = useWindowView(store)
  const [isHeld, setHeld] = useState(false)
  const held = useRef<Span | null>(null)
  const sec = edge === 'start' ? span.startSec : span.endSec

  const handleDown = (event: PointerEvent<HTMLDivElement>) => {
    if (event.button !== 0) return
    event.preventDefault()
    event.stopPropagation()
    event.currentTarget.setPointerCapture(event.pointerId)
    event.currentTarget.focus()
    held.current = span
    setHeld(true)
  }
  const handleMove = (event: PointerEvent<HTMLDivElement>) => {
    if (!held.current) return
    const lane = event.currentTarget.parentElement?.parentElement
    const x = event.clientX - (lane?.getBoundingClientRect().left ?? 0)
    const wanted = xToSec(store.get(), x)
    held.current = movedEdge(held.current, edge, event.altKey ? wanted : props.snap(wanted), view.durationSec)
    props.onPreview(held.current)
  }
  const handleUp = () => {
    if (held.current) props.onCommit(held.current)
    held.current = null
    setHeld(false)
    props.onPreview(null)
  }
  const handleKey = (event: KeyboardEvent) => {
    const steps = stepsOf(event)
    if (steps === 0) return
    event.preventDefault()
    event.stopPropagation()
    props.onCommit(movedEdge(span, edge, props.nudge(sec, steps, event.altKey), view.durationSec))
  }

  return (
    <div
      // Stands on the lanes at its moment: no input element can.
      // oxlint-disable-next-line jsx-a11y/prefer-tag-over-role
      role="slider"
      tabIndex={0}
      aria-label={`${name}, ${edge}`}
      aria-valuemin={edge === 'start' ? 0 : round(span.startSec)}
      aria-valuemax={edge === 'start' ? round(span.endSec) : round(view.durationSec)}
      aria-valuenow={round(sec)}
      aria-valuetext={props.valueText(sec)}
      title={`${name}, ${edge}`}
      onPointerDown={handleDown}
      onPointerMove={handleMove}
      onPointerUp={handleUp}
      onPointerCancel={handleUp}
      onKeyDown={handleKey}
      className={cx(
        'pointer-events-auto absolute top-0 h-6 w-6 touch-none',
        isHeld ? 'cursor-grabbing' : 'cursor-ew-resize',
        look === 'claim' ? 'text-claim' : 'text-ink'
      )}
      style={{ left: sec * scaleOf(view) - (edge === 'start' ? 24 : 0) }}
    >
      <svg viewBox="0 0 24 24" width="24" height="24" aria-hidden="true" fill="currentColor">
        <path d={edge === 'start' ? 'M24 9v14h-1.5v-3.5L16 16z' : 'M0 9v14h1.5v-3.5L8 16z'} />
      </svg>
    </div>
  )
}

/** Arrows one step, Page keys four; 0 for other keys. */
export const stepsOf = ({ key }: { key: string }): number =>
  ({ ArrowLeft: -1, ArrowDown: -1, ArrowRight: 1, ArrowUp: 1, PageDown: -4, PageUp: 4 })[key] ?? 0

const round = (sec: Sec): number => Math.round(sec * 100) / 100
