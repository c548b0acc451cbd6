// oxlint-disable jsx-a11y/prefer-tag-over-role -- see form-line.tsx
import { useEffect, useMemo, useRef, useState, type KeyboardEvent, type PointerEvent } from 'react'
import { useScope } from '@client/lib/scope'
import type { Player } from '@client/transport/player'
import type { BarMap } from '@shared/timing/bar-map'
import type { FormRow } from '@shared/timing/form-rows'
import { ordinal } from '@shared/music/ordinal'
import type { SectionStart } from '@shared/timing/sections'
import type { Span } from '@shared/timing/types'
import type { BarIndex, Sec } from '@shared/units'
import { barForKey, barsPerLine, columnsOf, stripLines } from './form-grid'
import { FormLine } from './form-line'
import { meanHeight, type PeaksSource } from './peaks-source'

export interface BarComments {
  open: number
  settled: number
}

export interface FormStripProps {
  player: Player
  barMap: BarMap
  rows: readonly FormRow[]
  /** Names over the columns of a form that comes round. */
  sections: readonly SectionStart[]
  isCyclic: boolean
  peaks: PeaksSource | null
  commentsOf: (bar: BarIndex) => BarComments
  /** "bar 19, 2nd chorus". */
  barName: (bar: BarIndex) => string
  selection: Span | null
  onSelect: (span: Span | null) => void
  /** Instead of the player's own seek, in a session that shares it. */
  onSeek?: (sec: Sec) => void
}

const labelPx = 72
const lookMs = 100

/** The whole take, one cell a bar: loudness, comments, where the line is, what is selected. */
export function FormStrip(props: FormStripProps) {
  const { player, barMap, rows, sections, isCyclic, peaks, selection, onSelect, onSeek = player.seek } = props
  const box = useRef<HTMLDivElement>(null)
  const [widthPx, setWidthPx] = useState(0)
  const [currentBar, setCurrentBar] = useState(() => barMap.barAt(player.heardPosition))
  const [focusBar, setFocusBar] = useState<BarIndex | null>(null)
  const [dragged, setDragged] = useState<{ from: BarIndex; to: BarIndex } | null>(null)
  const [marking, setMarking] = useState<'off' | 'first' | BarIndex>('off')

  useScope(
    (scope) => {
      const element = box.current
      if (!element) return
      const measure = () => setWidthPx(element.clientWidth)
      measure()
      scope.observe(new ResizeObserver(measure), element)
      const look = () => setCurrentBar(barMap.barAt(player.heardPosition))
      look()
      scope.interval(look, lookMs)
      scope.add(player.on('jump', ({ positionSec }) => setCurrentBar(barMap.barAt(positionSec))))
    },
    [player, barMap]
  )

  const lastSeen = useRef(currentBar)
  useEffect(() => {
    if (box.current) keepInView(box.current, lastSeen.current, currentBar)
    lastSeen.current = currentBar
  }, [currentBar])

  const perLine = barsPerLine(columnsOf(rows), widthPx - (widthPx >= 560 ? labelPx : 0))
  const lines = useMemo(() => stripLines(rows, perLine), [rows, perLine])
  const wash = useMemo(() => washOf(rows, barMap, peaks), [rows, barMap, peaks])
  const selectedBars = useMemo(() => {
    if (dragged) return range(dragged.from, dragged.to)
    return new Set(selection && selection.endSec > selection.startSec ? barMap.barsIn(selection) : [])
  }, [dragged, selection, barMap])
  const stopBar =
    focusBar ??
    (lines.some(({ cells }) => cells.some(({ bar }) => bar === currentBar))
      ? currentBar
      : (rows[0]?.cells[0]?.bar ?? 1))

  const selectBars = (from: BarIndex, to: BarIndex) => {
    const span = barMap.barsSpan(Math.min(from, to), Math.max(from, to))
    onSelect({ startSec: Math.max(0, span.startSec), endSec: Math.min(player.durationSec || span.endSec, span.endSec) })
  }
  const goTo = (bar: BarIndex) => onSeek(Math.max(0, barMap.barSec(bar)))

  const press = (bar: BarIndex, isExtending: boolean) => {
    setFocusBar(bar)
    if (marking === 'first') return setMarking(bar)
    if (marking !== 'off') {
      selectBars(marking, bar)
      return setMarking('off')
    }
    if (isExtending) return selectBars(anchorOf(selectedBars, focusBar ?? currentBar, bar), bar)
    goTo(bar)
  }
  const handleDown = (event: PointerEvent<HTMLElement>) => {
    const bar = barAtPoint(event)
    if (event.button !== 0 || bar === null || marking !== 'off' || event.shiftKey) return
    setDragged({ from: bar, to: bar })
  }
  const handleMove = (event: PointerEvent<HTMLElement>) => {
    if (!dragged || event.buttons === 0) return
    const bar = barAtPoint(event)
    if (bar !== null && bar !== dragged.to) setDragged({ ...dragged, to: bar })
  }
  const handleUp = (event: PointerEvent<HTMLElement>) => {
    const bar = barAtPoint(event)
    const hand = dragged
    setDragged(null)
    if (event.button !== 0) return
    if (hand && bar !== null && hand.from !== bar) {
      selectBars(hand.from, bar)
      setFocusBar(bar)
    } else if (bar !== null) press(bar, event.shiftKey)
  }
  const handleKey = (event: KeyboardEvent<HTMLElement>) => {
    const bar = Number((event.target as HTMLElement).dataset.bar ?? NaN)
    if (!Number.isFinite(bar)) return
    if (event.key === 'Enter' || event.key === ' ') {
      event.preventDefault()
      return press(bar, event.shiftKey)
    }
    if (event.key === 'Escape') {
      setMarking('off')
      return onSelect(null)
    }
    const next = barForKey(lines, bar, event.key)
    if (next === null) return
    event.preventDefault()
    event.stopPropagation()
    setFocusBar(next)
    box.current?.querySelector<HTMLElement>(`[data-bar="${next}"]`)?.focus()
    if (event.shiftKey) selectBars(anchorOf(selectedBars, bar, next), next)
  }

  const isWrapped = perLine < columnsOf(rows)
  return (
    <section aria-label="Form" className="min-w-0 select-none">
      <div className="mb-1 flex items-center justify-between gap-2">
        <span className="text-sm text-pencil">Form</span>
        <button
          type="button"
          aria-pressed={marking !== 'off'}
          onClick={() => setMarking(marking === 'off' ? 'first' : 'off')}
          className="min-h-7 rounded px-2 text-sm text-ink hover:bg-wash aria-pressed:bg-wash aria-pressed:underline"
        >
          {marking === 'off' ? 'Mark bars' : marking === 'first' ? 'Press the first bar …' : 'Press the last bar …'}
        </button>
      </div>
      <div
        ref={box}
        role="grid"
        tabIndex={-1}
        aria-label="Bars of the take"
        aria-multiselectable="true"
        onPointerDown={handleDown}
        onPointerMove={handleMove}
        onPointerUp={handleUp}
        onPointerCancel={() => setDragged(null)}
        onKeyDown={handleKey}
        className="relative grid max-h-[55dvh] touch-pan-y gap-1.5 overflow-y-auto pb-1 [contain:layout_paint]"
      >
        {isCyclic && !isWrapped ? <SectionNames sections={sections} columns={perLine} /> : null}
        {lines.map((line) => (
          <FormLine
            key={line.key}
            line={line}
            perLine={perLine}
            name={line.isFirst ? rowName(line.row, isCyclic) : ''}
            sections={isWrapped ? sections : noSections}
            currentBar={line.cells.some(({ bar }) => bar === currentBar) ? currentBar : null}
            stopBar={line.cells.some(({ bar }) => bar === stopBar) ? stopBar : null}
            selectedBars={line.cells.some(({ bar }) => selectedBars.has(bar)) ? selectedBars : noBars}
            wash={wash}
            commentsOf={props.commentsOf}
            barName={props.barName}
          />
        ))}
      </div>
    </section>
  )
}

/** A long take's strip scrolls along with the line, unless somebody has scrolled elsewhere to look. */
const keepInView = (box: HTMLElement, before: BarIndex, now: BarIndex): void => {
  const cellOf = (bar: BarIndex) => box.querySelector<HTMLElement>(`[data-bar="${bar}"]`)?.getBoundingClientRect()
  const frame = box.getBoundingClientRect()
  const isSeen = (cell: DOMRect | undefined) => cell && cell.bottom > frame.top && cell.top < frame.bottom
  const target = cellOf(now)
  if (!target || !isSeen(cellOf(before))) return
  if (target.top < frame.top || target.bottom > frame.bottom) box.scrollTop += target.top - frame.top - frame.height / 3
}

const noBars: ReadonlySet<BarIndex> = new Set()
const noSections: readonly SectionStart[] = []

const range = (from: BarIndex, to: BarIndex): Set<BarIndex> =>
  new Set(Array.from({ length: Math.abs(to - from) + 1 }, (_, n) => Math.min(from, to) + n))

/** The end of the selection that stays while the other one moves to `to`. */
const anchorOf = (selected: ReadonlySet<BarIndex>, from: BarIndex, to: BarIndex): BarIndex => {
  if (selected.size === 0) return from
  const [first, last] = [Math.min(...selected), Math.max(...selected)]
  if (from === first || from === last) return from === first ? last : first
  return Math.abs(to - first) > Math.abs(to - last) ? first : last
}

const barAtPoint = ({ clientX, clientY }: { clientX: number; clientY: number }): BarIndex | null => {
  const cell = document.elementFromPoint(clientX, clientY)?.closest<HTMLElement>('[data-bar]')
  const bar = Number(cell?.dataset.bar ?? NaN)
  return Number.isFinite(bar) ? bar : null
}

/** Loudness of each bar, 0-1, the loudest bar of the take being 1. */
const washOf = (rows: readonly FormRow[], barMap: BarMap, peaks: PeaksSource | null): ReadonlyMap<BarIndex, number> => {
  const heights = new Map<BarIndex, number>()
  if (!peaks) return heights
  for (const { cells } of rows)
    for (const { bar } of cells) {
      const { startSec, endSec } = barMap.barSpan(bar)
      heights.set(bar, meanHeight(peaks, Math.max(0, startSec), endSec))
    }
  const loudest = Math.max(...heights.values(), 1e-6)
  // Squared, as loudness goes with power: quiet bars stand clearly below loud ones.
  return new Map([...heights].map(([bar, height]) => [bar, (height / loudest) ** 2]))
}

const rowName = ({ kind, pass, section }: FormRow, isCyclic: boolean): string => {
  if (section) return section.name || 'no name'
  if (kind === 'pass' && pass !== null)
    return isCyclic ? `${ordinal(pass)}${pass === 1 ? ' chorus' : ''}` : ordinal(pass)
  if (kind === 'bars') return ''
  return kind === 'introduction' ? 'Intro' : kind.charAt(0).toUpperCase() + kind.slice(1)
}

const SectionNames = ({ sections, columns }: { sections: readonly SectionStart[]; columns: number }) => (
  <div aria-hidden="true" className="flex text-sm leading-5 font-semibold">
    <span className="w-[4.5rem] flex-none" />
    <div className="grid min-w-0 flex-1" style={{ gridTemplateColumns: `repeat(${columns}, minmax(0, 1fr))` }}>
      {sections.map(({ name, formBar }) => (
        <span key={formBar} className="row-start-1 whitespace-nowrap" style={{ gridColumnStart: formBar }}>
          {name}
        </span>
      ))}
    </div>
  </div>
)
