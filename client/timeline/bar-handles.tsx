// Bar lines while the bar map is being corrected: one tab stop, Page keys to the next bar, arrows to nudge, or drag.
import { useRef, useState, type KeyboardEvent, type PointerEvent } from 'react'
import { cx } from '@client/ui/classes'
import type { BarMap } from '@shared/timing/bar-map'
import type { BarIndex, Sec } from '@shared/units'
import type { BarMark } from './bar-marks'
import { clamp, xToSec } from './geometry'
import { Moving } from './moving'
import type { ViewStore } from './view-store'

export interface BarHandlesProps {
  store: ViewStore
  marks: BarMark[]
  barMap: BarMap
  selectedBar: BarIndex | null
  barName: (bar: BarIndex) => string
  valueText: (sec: Sec) => string
  onSelectBar: (bar: BarIndex) => void
  onMoveBar: (bar: BarIndex, sec: Sec) => void
}

export const barNudgeSec = 0.01
const handlePx = 24
const leastGapSec = 0.05

/** A line stays between its neighbours. */
export const heldBetween = (barMap: BarMap, bar: BarIndex, sec: Sec): Sec =>
  clamp(sec, Math.max(0, barMap.barSec(bar - 1) + leastGapSec), barMap.barSec(bar + 1) - leastGapSec)

export function BarHandles(props: BarHandlesProps) {
  const { store, marks, selectedBar } = props
  const roomy = marks.filter(({ width, hasNumber }) => hasNumber && width >= handlePx)
  const stop = roomy.some(({ bar }) => bar === selectedBar) ? selectedBar : (roomy[0]?.bar ?? null)
  return (
    <Moving store={store}>
      {roomy.map((mark) => (
        <Handle key={mark.bar} {...props} mark={mark} isStop={mark.bar === stop} />
      ))}
    </Moving>
  )
}

function Handle({ store, mark, isStop, barMap, ...props }: BarHandlesProps & { mark: BarMark; isStop: boolean }) {
  const { bar, x } = mark
  const [dragged, setDragged] = useState<{ sec: Sec; x: number } | null>(null)
  const element = useRef<HTMLDivElement>(null)
  const sec = dragged?.sec ?? barMap.barSec(bar)

  const handleDown = (event: PointerEvent<HTMLDivElement>) => {
    if (event.button !== 0) return
    event.stopPropagation()
    event.currentTarget.setPointerCapture(event.pointerId)
    props.onSelectBar(bar)
  }
  const handleMove = (event: PointerEvent<HTMLDivElement>) => {
    if (!event.currentTarget.hasPointerCapture(event.pointerId)) return
    const lane = event.currentTarget.parentElement?.parentElement
    const at = event.clientX - (lane?.getBoundingClientRect().left ?? 0)
    const view = store.get()
    setDragged({ sec: heldBetween(barMap, bar, xToSec(view, at)), x: at + view.scrollPx })
  }
  const handleUp = () => {
    if (dragged) props.onMoveBar(bar, dragged.sec)
    setDragged(null)
  }
  const handleKey = (event: KeyboardEvent) => {
    const nudge = { ArrowLeft: -1, ArrowRight: 1, ArrowDown: -1, ArrowUp: 1 }[event.key]
    const turn = { PageUp: -1, PageDown: 1 }[event.key]
    if (nudge === undefined && turn === undefined) return
    event.preventDefault()
    event.stopPropagation()
    if (turn !== undefined) return focusBar(element.current, bar + turn, props.onSelectBar)
    props.onSelectBar(bar)
    props.onMoveBar(bar, heldBetween(barMap, bar, sec + (nudge ?? 0) * barNudgeSec * (event.shiftKey ? 5 : 1)))
  }

  return (
    <div
      ref={element}
      // Stands on the lanes at its moment: no input element can.
      // oxlint-disable-next-line jsx-a11y/prefer-tag-over-role
      role="slider"
      tabIndex={isStop ? 0 : -1}
      data-bar-line={bar}
      aria-label={`Line of ${props.barName(bar)}`}
      aria-valuemin={0}
      aria-valuemax={Math.round(store.get().durationSec * 100) / 100}
      aria-valuenow={Math.round(sec * 1000) / 1000}
      aria-valuetext={props.valueText(sec)}
      title={`Line of ${props.barName(bar)}`}
      onPointerDown={handleDown}
      onPointerMove={handleMove}
      onPointerUp={handleUp}
      onPointerCancel={handleUp}
      onKeyDown={handleKey}
      onFocus={() => props.onSelectBar(bar)}
      className="pointer-events-auto absolute inset-y-0 w-6 cursor-ew-resize touch-none"
      style={{ left: (dragged?.x ?? x) - handlePx / 2 }}
    >
      <span
        className={cx(
          'absolute inset-y-0 left-1/2 w-0.5 -translate-x-1/2',
          bar === props.selectedBar ? 'bg-ink' : 'bg-pencil'
        )}
      />
      <span className="absolute bottom-0 left-1/2 h-2.5 w-2.5 -translate-x-1/2 border-2 border-ink bg-sheet" />
    </div>
  )
}

const focusBar = (from: HTMLElement | null, bar: BarIndex, select: (bar: BarIndex) => void): void => {
  const next = from?.parentElement?.querySelector<HTMLElement>(`[data-bar-line="${bar}"]`)
  if (!next) return
  select(bar)
  next.focus()
}
