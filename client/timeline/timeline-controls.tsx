// The row above the lanes: snapping, marking by two clicks, nudging without dragging, zoom, following.
import { IconButton } from '@client/ui/icon-button'
import type { Choice } from '@client/ui/select'
import { Sentence, SentenceChoice } from '@client/ui/sentence'
import { Toolbar } from '@client/ui/toolbar'
import type { Snap } from '@shared/timing/snap'
import type { Marking } from './use-lane-pointer'

export interface NudgeTarget {
  /** "Comment b", "Line of bar 19". */
  name: string
  /** One pair of buttons each: "start", "end"; a bar line has a single unnamed one. */
  edges: { name: string; onNudge: (steps: number) => void }[]
}

export interface TimelineControlsProps {
  hasBars: boolean
  snap: Snap
  onSnap: (snap: Snap) => void
  marking: Marking
  hasSelection: boolean
  onMark: () => void
  onStopMarking: () => void
  onClear: () => void
  nudge: NudgeTarget | null
  isFollowing: boolean
  onFollow: (isFollowing: boolean) => void
  onZoom: (direction: 1 | -1) => void
  onZoomWhole: () => void
  onZoomSelection: () => void
}

const quiet = 'min-h-8 rounded px-2 text-sm text-ink hover:bg-wash aria-pressed:bg-wash aria-pressed:underline'

export function TimelineControls(props: TimelineControlsProps) {
  const { marking, nudge } = props
  return (
    <div className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1">
      <Toolbar label="Selecting">
        {props.hasBars ? (
          <div className="mr-1 text-sm">
            <Sentence label="Snapping">
              snap to{' '}
              <SentenceChoice label="Snap to" value={props.snap} choices={snapChoices} onChange={props.onSnap} />
            </Sentence>
          </div>
        ) : null}
        <button
          type="button"
          className={quiet}
          aria-pressed={marking !== null}
          onClick={marking ? props.onStopMarking : props.onMark}
        >
          {marking === null
            ? 'Mark with two clicks'
            : marking.next === 'start'
              ? 'Click the start …'
              : 'Click the end …'}
        </button>
        {props.hasSelection && !marking ? (
          <button type="button" className={quiet} onClick={props.onClear}>
            Clear
          </button>
        ) : null}
        {nudge?.edges.map((edge) => (
          <span key={edge.name} className="inline-flex items-center">
            <span className="pl-2 text-sm text-pencil">{`${nudge.name} ${edge.name}`.trim()}</span>
            <IconButton
              icon="arrowLeft"
              label={`${nudge.name} ${edge.name} earlier`}
              onClick={() => edge.onNudge(-1)}
            />
            <IconButton icon="arrowRight" label={`${nudge.name} ${edge.name} later`} onClick={() => edge.onNudge(1)} />
          </span>
        ))}
      </Toolbar>
      <div className="ml-auto">
        <Toolbar label="View">
          <button type="button" className={quiet} onClick={() => props.onFollow(!props.isFollowing)}>
            {props.isFollowing ? 'Stop following' : 'Follow the line'}
          </button>
          <button type="button" className={quiet} onClick={props.onZoomWhole}>
            Whole take
          </button>
          {props.hasSelection ? (
            <button type="button" className={quiet} onClick={props.onZoomSelection}>
              Selection
            </button>
          ) : null}
          <IconButton icon="zoomOut" label="Look from farther" onClick={() => props.onZoom(-1)} />
          <IconButton icon="zoomIn" label="Look nearer" onClick={() => props.onZoom(1)} />
        </Toolbar>
      </div>
    </div>
  )
}

const snapChoices: readonly Choice<Snap>[] = [
  { value: 'bar', label: 'bars' },
  { value: 'beat', label: 'beats' },
  { value: 'none', label: 'nothing' }
]
