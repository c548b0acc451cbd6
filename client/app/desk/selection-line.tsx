import type { Span } from '@shared/timing/types'
import { Button } from '@client/ui/button'
import type { DeskModel } from './desk-model'

export interface SelectionLineProps {
  model: DeskModel
  selection: Span | null
  onCopy: () => void
  onClear: () => void
}

/** What is selected, in words, and its address. */
export function SelectionLine({ model, selection, onCopy, onClear }: SelectionLineProps) {
  if (!selection)
    return <p className="min-w-0 text-sm text-pencil">Nothing is selected: drag over bars, or mark them.</p>
  const { place, where, over } = model.placeOf(selection)
  return (
    <div className="flex min-w-0 flex-wrap items-center gap-x-2">
      <p className="min-w-0">
        {place}
        {where || over ? <span className="text-pencil"> · {[where, over].filter(Boolean).join(' · ')}</span> : null}
      </p>
      <span className="flex flex-none">
        <Button look="quiet" icon="link" onClick={onCopy}>
          Copy its address
        </Button>
        <Button look="quiet" onClick={onClear}>
          Let go
        </Button>
      </span>
    </div>
  )
}
