import { useState, type ReactNode } from 'react'
import { CommentsPanel, type CommentsPanelProps } from '@client/features/comments/comments-panel'
import { Tabs } from '@client/ui/tabs'
import type { Player } from '@client/transport/player'
import type { DeskModel } from './desk-model'
import { PanelBoundary } from './panel-boundary'
import { spanHere, useBarHere } from './use-bar-here'

export interface DeskMarginProps extends Omit<CommentsPanelProps, 'spanHere' | 'hereKey'> {
  player: Player
  model: DeskModel
  people: ReactNode
  /** Fills the height it is given; otherwise it is as long as what stands in it. */
  fill: boolean
}

type MarginTab = 'comments' | 'people'

/** Words beside the bars. */
export function DeskMargin({ player, model, people, fill, ...comments }: DeskMarginProps) {
  const [tab, setTab] = useState<MarginTab>('comments')
  const bar = useBarHere(player, model.barMap)
  return (
    <Tabs<MarginTab>
      label="Margin"
      fill={fill}
      chosen={tab}
      onChoose={setTab}
      tabs={[
        {
          key: 'comments',
          label: 'Comments',
          panel: (
            <PanelBoundary name="the comments">
              <CommentsPanel {...comments} spanHere={() => spanHere(player, model.barMap)} hereKey={bar} />
            </PanelBoundary>
          )
        },
        { key: 'people', label: 'People', panel: <PanelBoundary name="the people">{people}</PanelBoundary> }
      ]}
    />
  )
}
