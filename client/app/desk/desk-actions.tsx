import { Link } from 'react-router-dom'
import type { Take } from '@shared/contracts/takes'
import type { Tune } from '@shared/contracts/tunes'
import { paths } from '@client/lib/paths'
import { QuietButton, quietClass } from './quiet-button'

export interface DeskActionsProps {
  take: Take
  tune: Tune | null
  areBarsOpen: boolean
  onBars: () => void
  onTune: () => void
  onTable: () => void
}

/** What can be done with the take's bars and chords, at the right of the selection's words. */
export function DeskActions({ take, tune, areBarsOpen, onBars, onTune, onTable }: DeskActionsProps) {
  const can = (ability: string) => take.abilities.includes(ability)
  return (
    <div className="flex flex-wrap items-center">
      {can('take:edit-bars') ? (
        <QuietButton aria-expanded={areBarsOpen} onClick={onBars}>
          Edit bars
        </QuietButton>
      ) : null}
      {tune ? (
        <Link to={paths.tune(tune.id)} className={quietClass}>
          Chart
        </Link>
      ) : can('take:edit') ? (
        <QuietButton aria-haspopup="dialog" onClick={onTune}>
          Put it to a tune
        </QuietButton>
      ) : null}
      <QuietButton aria-haspopup="dialog" onClick={onTable}>
        Bars and chords as a table
      </QuietButton>
    </div>
  )
}
