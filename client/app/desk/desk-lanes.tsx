import { useMemo, type ReactNode, type RefObject } from 'react'
import type { ShownComment } from '@client/features/comments/changes'
import { FormStrip, type BarComments } from '@client/timeline/form-strip'
import { Timeline, type TimelineHandle } from '@client/timeline/timeline'
import type { Player } from '@client/transport/player'
import { Empty } from '@client/ui/empty'
import type { Snap } from '@shared/timing/snap'
import type { Span } from '@shared/timing/types'
import { commentsByBar } from './desk-model'
import { PanelBoundary } from './panel-boundary'
import type { Hearing } from './use-hearing'
import type { TakeMaterial } from './use-take-material'

export interface DeskLanesProps {
  player: Player
  gainDb: number
  material: TakeMaterial
  hearing: Hearing
  timeline: RefObject<TimelineHandle | null>
  selection: Span | null
  onSelect: (span: Span | null) => void
  /** From the strip a selection loops at once. */
  onSelectBars: (span: Span | null) => void
  selectedId: string | null
  onSelectComment: (comment: ShownComment) => void
  snap: Snap
  onSnap: (snap: Snap) => void
  isFollowing: boolean
  onFollow: (isFollowing: boolean) => void
  isEditingBars: boolean
  /** Phones: the strip without the timeline. */
  isNarrow: boolean
  /** What lays the first bars; null for those who may not. */
  layBars: ReactNode
  /** Under the timeline. */
  panel: ReactNode
  /** Stands between strip and timeline. */
  children: ReactNode
}

const noComments: BarComments = { open: 0, settled: 0 }

/** Form strip and timeline over one selection. */
export function DeskLanes(props: DeskLanesProps) {
  const { player, material, hearing, selection } = props
  const { model, comments, spans, peaks } = material
  const byBar = useMemo(() => commentsByBar(model.barMap, comments.comments), [model.barMap, comments.comments])
  const { controls } = hearing
  const find = (id: string) => comments.comments.find((comment) => comment.id === id)
  const canMove = find(props.selectedId ?? '')?.abilities.includes('comment:edit') ?? false

  return (
    <>
      <div className="px-3 pt-3 pb-2 sm:px-4">
        <PanelBoundary name="the form">
          {model.barMap ? (
            <FormStrip
              player={player}
              barMap={model.barMap}
              rows={model.rows}
              sections={model.sections}
              isCyclic={model.isCyclic}
              peaks={peaks}
              commentsOf={(bar) => byBar.get(bar) ?? noComments}
              barName={model.barName}
              selection={selection}
              onSelect={props.onSelectBars}
              onSeek={controls.seek}
            />
          ) : (
            <Empty
              says="The whole take stands here, a cell for every bar, once its bars have been laid."
              action={props.layBars}
            />
          )}
        </PanelBoundary>
      </div>
      <div className="border-t border-rule px-3 py-2 sm:px-4">{props.children}</div>
      {props.isNarrow && model.barMap ? null : (
        <div className="px-3 pb-3 sm:px-4">
          <PanelBoundary name="the timeline">
            <Timeline
              ref={props.timeline}
              player={player}
              durationSec={model.durationSec}
              gainDb={props.gainDb}
              peaks={peaks}
              barMap={model.barMap}
              barLabel={model.barLabel}
              barName={model.barName}
              chordStyle={material.chordStyle}
              chordsOf={model.hasChords ? model.chordsOf : undefined}
              sections={model.sectionMarks}
              spans={spans}
              selectedSpanId={props.selectedId}
              onSelectSpan={(id) => {
                const comment = find(id)
                if (comment) props.onSelectComment(comment)
              }}
              onMoveSpan={canMove ? comments.acts.move : undefined}
              selection={selection}
              onSelect={props.onSelect}
              snap={props.snap}
              onSnap={props.onSnap}
              isFollowing={props.isFollowing}
              onFollow={props.onFollow}
              onSeek={controls.seek}
              lines={hearing.lines}
              leaderName={hearing.leaderName}
              valueText={model.valueText}
              editBars={props.isEditingBars}
              onMoveBar={material.edits.moveBar}
            />
          </PanelBoundary>
        </div>
      )}
      {props.panel}
    </>
  )
}
