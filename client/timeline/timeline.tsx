import { useImperativeHandle, useMemo, useState, type KeyboardEvent, type Ref } from 'react'
import { useScope } from '@client/lib/scope'
import { useLatest } from '@client/lib/use-latest'
import type { Player } from '@client/transport/player'
import type { BarMap } from '@shared/timing/bar-map'
import type { ChordStyle } from '@shared/music/chord-typeset'
import { nudgeSec, snapSec, snapSpan, type Snap } from '@shared/timing/snap'
import type { Span } from '@shared/timing/types'
import type { BarIndex, Sec } from '@shared/units'
import { BarHandles, barNudgeSec, heldBetween } from './bar-handles'
import { barMarks } from './bar-marks'
import { ChordLane } from './chord-lane'
import { EdgeThumbs, movedEdge, stepsOf, type Edge } from './edge-thumbs'
import { extendSpan, scaleOf } from './geometry'
import { loudestOf, type PeaksSource } from './peaks-source'
import { bobPx, PlumbLines } from './plumb-lines'
import { BarLines, RulerLane, SectionLane } from './ruler'
import { SelectionBand } from './selection-band'
import { SpanLane, spanRowPx } from './span-lane'
import { rowsUsed, stackSpans } from './stack-spans'
import { TimelineControls, type NudgeTarget } from './timeline-controls'
import type { BarChord, CommentSpan, LineSource, SectionMark } from './timeline-types'
import { useLanePointer } from './use-lane-pointer'
import { useTimelineView } from './use-timeline-view'
import { ViewBar } from './view-bar'
import { useWindowView } from './view-store'
import { soundHeightPx, Waveform } from './waveform'

/** For keys that live outside the timeline. */
export interface TimelineHandle {
  zoom(direction: 1 | -1): void
  zoomWhole(): void
  zoomTo(span: Span): void
  show(sec: Sec): void
}

export interface TimelineProps {
  ref?: Ref<TimelineHandle>
  player: Player
  durationSec: Sec
  /** The same as the player's, so that the drawing shows what is heard. */
  gainDb?: number
  peaks: PeaksSource | null
  barMap: BarMap | null
  /** The number on the ruler; bars as counted through the take without it. */
  barLabel?: (bar: BarIndex) => string
  /** Read out: "bar 19, 2nd chorus". */
  barName?: (bar: BarIndex) => string
  chordsOf?: (bar: BarIndex) => readonly BarChord[]
  chordStyle?: ChordStyle
  sections?: readonly SectionMark[]
  spans: readonly CommentSpan[]
  selectedSpanId?: string | null
  onSelectSpan?: (id: string) => void
  /** Edges of the selected comment can be moved when this is given. */
  onMoveSpan?: (id: string, span: Span) => void
  selection: Span | null
  onSelect: (span: Span | null) => void
  snap: Snap
  onSnap: (snap: Snap) => void
  isFollowing: boolean
  onFollow: (isFollowing: boolean) => void
  /** Instead of the player's own seek, in a session that shares it. */
  onSeek?: (sec: Sec) => void
  /** Own line only, if not given. The session's line is brass; beside it one's own is ink. */
  lines?: readonly LineSource[]
  /** The own line hangs from this name while its bearer leads us. */
  leaderName?: string
  /** "2 minutes 3 seconds, bar 41, C minor seventh". */
  valueText: (sec: Sec) => string
  /** Bar lines get handles. */
  editBars?: boolean
  onMoveBar?: (bar: BarIndex, sec: Sec) => void
}

const sectionPx = 24
const rulerPx = 26
const chordPx = 30
const noSections: readonly SectionMark[] = []
const plainBarName = (bar: BarIndex) => `bar ${bar}`

/** Lanes of a take under one plumb line: sections, bars, chart, sound, comments. */
export function Timeline(props: TimelineProps) {
  const { player, durationSec, barMap, spans, selection, snap, valueText, onSelect } = props
  const { sections = noSections, barLabel = String, barName = plainBarName, onSeek = player.seek } = props
  const beatSec = barMap ? 60 / barMap.tempoAt(durationSec / 2) : undefined
  const timelineView = useTimelineView(durationSec, beatSec)
  const { store, lanes } = timelineView
  const view = useWindowView(store)
  const [selectedBar, setSelectedBar] = useState<BarIndex | null>(null)
  const [movedSpan, setMovedSpan] = useState<Span | null>(null)
  const setting = { barMap, durationSec }

  const marks = useMemo(() => (barMap ? barMarks(view, barMap) : []), [view, barMap])
  const sectionBars = useMemo(() => new Set(sections.map(({ bar }) => bar)), [sections])
  const scale = scaleOf(view)
  const spanRows = useMemo(() => Math.max(1, rowsUsed(stackSpans(spans, scale))), [spans, scale])
  const gain = useMemo(() => fillingGain(props.peaks, props.gainDb ?? 0), [props.peaks, props.gainDb])
  const ownLines = useMemo<LineSource[]>(
    () => [{ kind: 'own', positionSec: () => player.heardPosition, label: props.leaderName }],
    [player, props.leaderName]
  )
  const hand = useLanePointer({
    store,
    selection,
    snapSpan: (span) => snapSpan(span, snap, setting),
    lineBefore: (sec) => (barMap ? Math.max(0, barMap.barSec(barMap.barAt(sec))) : sec),
    onSeek,
    onSelect
  })
  const isMarking = hand.marking !== null
  const stopMarking = useLatest(hand.stopMarking)
  useScope(
    (scope) => {
      if (!isMarking) return
      scope.listen(window, 'keydown', ({ key }) => {
        if (key === 'Escape') stopMarking.current()
      })
    },
    [isMarking, stopMarking]
  )
  useImperativeHandle(props.ref, () => ({
    zoom: (direction) => timelineView.zoom(direction, player.heardPosition),
    zoomWhole: timelineView.zoomWhole,
    zoomTo: timelineView.zoomTo,
    show: timelineView.show
  }))

  const selectedSpan = spans.find(({ id }) => id === props.selectedSpanId) ?? null
  const canMoveSpan = selectedSpan !== null && props.onMoveSpan !== undefined
  const isEditingBars = Boolean(props.editBars && barMap && props.onMoveBar)
  const shownSelection = hand.preview ?? selection
  const shownSpan = useMemo(
    () => (selectedSpan && movedSpan ? { ...selectedSpan, span: movedSpan } : selectedSpan),
    [selectedSpan, movedSpan]
  )
  const shownSpans = useMemo(
    () => (shownSpan && movedSpan ? spans.map((span) => (span.id === shownSpan.id ? shownSpan : span)) : spans),
    [spans, shownSpan, movedSpan]
  )

  const fineOr = (sec: Sec, steps: number, isFine: boolean) =>
    nudgeSec(sec, isFine ? 'none' : snap, isFine ? steps / 10 : steps, setting)

  const handleLineKey = (event: KeyboardEvent) => {
    const now = player.heardPosition
    const steps = stepsOf(event)
    const isPage = event.key.startsWith('Page')
    const target =
      event.key === 'Home'
        ? 0
        : event.key === 'End'
          ? durationSec
          : steps === 0
            ? null
            : nudgeSec(now, isPage ? 'bar' : 'beat', Math.sign(steps), setting)
    if (target === null) return
    event.preventDefault()
    event.stopPropagation()
    if (event.shiftKey) onSelect(extendSpan(selection, now, target))
    onSeek(target)
    timelineView.show(target)
  }

  const nudge = nudgeTarget()
  function nudgeTarget(): NudgeTarget | null {
    if (canMoveSpan && selectedSpan) {
      const { id, letter, span } = selectedSpan
      const pair = (edge: Edge) => ({
        name: edge,
        onNudge: (steps: number) =>
          props.onMoveSpan?.(
            id,
            movedEdge(span, edge, fineOr(edge === 'start' ? span.startSec : span.endSec, steps, false), durationSec)
          )
      })
      return { name: `Comment ${letter}`, edges: [pair('start'), pair('end')] }
    }
    if (isEditingBars && barMap && selectedBar !== null) {
      const move = (steps: number) =>
        props.onMoveBar?.(
          selectedBar,
          heldBetween(barMap, selectedBar, barMap.barSec(selectedBar) + steps * barNudgeSec)
        )
      return { name: `Line of ${barName(selectedBar)}`, edges: [{ name: '', onNudge: move }] }
    }
    return null
  }

  const commentsPx = spanRows * spanRowPx + 10
  const pointer = (isOnRuler: boolean) => ({
    onPointerDown: (event: React.PointerEvent<HTMLElement>) => hand.down(event, isOnRuler),
    onPointerMove: hand.move,
    onPointerUp: hand.up,
    onPointerCancel: hand.cancel
  })

  return (
    <section aria-label="Timeline" className="grid min-w-0 gap-1 select-none">
      <TimelineControls
        hasBars={barMap !== null}
        snap={snap}
        onSnap={props.onSnap}
        marking={hand.marking}
        hasSelection={selection !== null}
        onMark={hand.startMarking}
        onStopMarking={hand.stopMarking}
        onClear={() => onSelect(null)}
        nudge={nudge}
        isFollowing={props.isFollowing}
        onFollow={props.onFollow}
        onZoom={(direction) => timelineView.zoom(direction, player.heardPosition)}
        onZoomWhole={timelineView.zoomWhole}
        onZoomSelection={() => selection && timelineView.zoomTo(selection)}
      />
      <div className="grid grid-cols-1 sm:grid-cols-[4.5rem_minmax(0,1fr)]">
        <div aria-hidden="true" className="hidden text-sm text-pencil sm:block">
          <LaneName height={sectionPx}>{''}</LaneName>
          {barMap ? <LaneName height={rulerPx}>Bars</LaneName> : <LaneName height={rulerPx}>{''}</LaneName>}
          {props.chordsOf && barMap ? <LaneName height={chordPx}>Chart</LaneName> : null}
          <LaneName height={soundHeightPx}>Sound</LaneName>
        </div>
        <div data-lanes className="relative min-w-0">
          <div ref={lanes} className="relative overflow-hidden [contain:layout_paint]" style={{ paddingBottom: bobPx }}>
            {barMap ? (
              <div className="absolute inset-x-0" style={{ top: sectionPx, bottom: bobPx }}>
                <BarLines store={store} marks={marks} sectionBars={sectionBars} />
              </div>
            ) : null}
            <div className="relative" style={{ height: sectionPx }}>
              {barMap ? <SectionLane store={store} barMap={barMap} sections={sections} /> : null}
            </div>
            <div className="relative touch-none" style={{ height: rulerPx }} {...pointer(true)}>
              <RulerLane store={store} marks={marks} barLabel={barLabel} />
              {shownSelection && !isEditingBars ? (
                <EdgeThumbs
                  store={store}
                  span={shownSelection}
                  name="Selection"
                  look="ink"
                  snap={(sec) => snapSec(sec, snap, setting)}
                  nudge={fineOr}
                  valueText={valueText}
                  onPreview={hand.setPreview}
                  onCommit={onSelect}
                />
              ) : null}
              {isEditingBars && barMap ? (
                <BarHandles
                  store={store}
                  marks={marks}
                  barMap={barMap}
                  selectedBar={selectedBar}
                  barName={barName}
                  valueText={valueText}
                  onSelectBar={setSelectedBar}
                  onMoveBar={(bar, sec) => props.onMoveBar?.(bar, sec)}
                />
              ) : null}
            </div>
            {props.chordsOf && barMap ? (
              <div className="relative touch-pan-y" style={{ height: chordPx }} {...pointer(false)}>
                <ChordLane
                  store={store}
                  marks={marks}
                  barMap={barMap}
                  chordsOf={props.chordsOf}
                  chordStyle={props.chordStyle}
                />
              </div>
            ) : null}
            <div
              className="relative cursor-text touch-pan-y"
              style={{ height: soundHeightPx }}
              data-testid="sound"
              {...pointer(false)}
            >
              <SelectionBand store={store} span={shownSelection} />
              <Waveform store={store} player={player} durationSec={durationSec} peaks={props.peaks} gain={gain} />
            </div>
            <div className="relative mt-1.5" style={{ height: commentsPx }}>
              <SpanLane
                store={store}
                spans={shownSpans}
                selectedId={props.selectedSpanId ?? null}
                onSelect={(id) => props.onSelectSpan?.(id)}
                onLookNearer={timelineView.zoomTo}
              />
              {canMoveSpan && shownSpan ? (
                <EdgeThumbs
                  store={store}
                  span={shownSpan.span}
                  name={`Comment ${shownSpan.letter}`}
                  look="claim"
                  snap={(sec) => snapSec(sec, snap, setting)}
                  nudge={fineOr}
                  valueText={valueText}
                  onPreview={setMovedSpan}
                  onCommit={(span) => props.onMoveSpan?.(shownSpan.id, span)}
                />
              ) : null}
            </div>
          </div>
          <PlumbLines
            store={store}
            player={player}
            lines={props.lines ?? ownLines}
            valueText={valueText}
            onSeek={onSeek}
            onKey={handleLineKey}
            onShow={timelineView.show}
            onMoved={(sec) => {
              if (props.isFollowing) timelineView.follow(sec)
            }}
          />
        </div>
        <div className="sm:col-start-2">
          <ViewBar store={store} />
        </div>
      </div>
    </section>
  )
}

/** As loud as it is heard; a quiet take is drawn larger so that its loudest note nearly fills the lane. */
const fillingGain = (peaks: PeaksSource | null, gainDb: number): number => {
  const gain = 10 ** (gainDb / 20)
  const loudest = peaks ? loudestOf(peaks) * gain : 0
  return loudest > 0 ? gain * Math.max(1, 0.94 / loudest) : gain
}

const LaneName = ({ height, children }: { height: number; children: string }) => (
  <div className="flex items-center" style={{ height }}>
    {children}
  </div>
)
