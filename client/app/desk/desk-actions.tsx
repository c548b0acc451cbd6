import type { Take } from '@shared/contracts/takes'
import type { Tune } from '@shared/contracts/tunes'
import { PlayedOver } from '@client/features/takes/played-over'
import { QuietButton } from './quiet-button'

export type DeskPanel = 'bars' | 'chart' | 'over'

export interface DeskActionsProps {
  take: Take
  tune: Tune | null
  /** Which panel stands open under the timeline. */
  panel: DeskPanel | null
  onPanel: (panel: DeskPanel | null) => void
  onTune: () => void
  onTable: () => void
  onClip: () => void
  onSettings: () => void
}

/** What can be done with the take's bars and chords, at the right of the selection's words. */
export function DeskActions({ take, tune, panel, onPanel, onTune, onTable, onClip, onSettings }: DeskActionsProps) {
  const can = (ability: string) => take.abilities.includes(ability)
  const toggle = (which: DeskPanel) => onPanel(panel === which ? null : which)
  return (
    <div className="flex flex-wrap items-center">
      {take.overTakeId ? <PlayedOver takeId={take.overTakeId} /> : null}
      {can('take:edit-bars') ? (
        <QuietButton aria-expanded={panel === 'bars'} onClick={() => toggle('bars')}>
          Edit bars
        </QuietButton>
      ) : null}
      {tune ? (
        <QuietButton aria-expanded={panel === 'chart'} onClick={() => toggle('chart')}>
          {tune.abilities.includes('tune:edit') ? 'Edit chart' : 'Chart'}
        </QuietButton>
      ) : can('take:edit') ? (
        <QuietButton aria-haspopup="dialog" onClick={onTune}>
          Put it to a tune
        </QuietButton>
      ) : null}
      {can('take:hear') ? (
        <QuietButton aria-expanded={panel === 'over'} onClick={() => toggle('over')}>
          Record over it
        </QuietButton>
      ) : null}
      <QuietButton aria-haspopup="dialog" onClick={onTable}>
        Bars and chords as a table
      </QuietButton>
      {can('take:hear') ? (
        <QuietButton aria-haspopup="dialog" onClick={onClip}>
          Keep as a file
        </QuietButton>
      ) : null}
      <QuietButton aria-haspopup="dialog" onClick={onSettings}>
        {can('take:edit') ? 'Share and keep' : 'About this take'}
      </QuietButton>
    </div>
  )
}
