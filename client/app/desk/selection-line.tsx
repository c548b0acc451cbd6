import type { Span } from '@shared/timing/types'
import type { DeskModel } from './desk-model'
import { QuietButton } from './quiet-button'

export interface SelectionLineProps {
  model: DeskModel
  selection: Span | null
  onCopy: () => void
  /** Where no timeline stands below that can do it. */
  onClear?: () => void
}

/** What is selected, in words, and its address. */
export function SelectionLine({ model, selection, onCopy, onClear }: SelectionLineProps) {
  if (!selection)
    return (
      <p className="min-w-0 py-1 text-sm text-pencil">
        Nothing is selected: drag over {model.barMap ? 'bars' : 'the sound'}, or mark the ends.
      </p>
    )
  const { place, where, over } = model.placeOf(selection)
  return (
    <div className="flex min-w-0 flex-wrap items-center gap-x-1">
      <p className="min-w-0 pr-1">
        {place}
        {where || over ? <span className="text-pencil"> · {[where, over].filter(Boolean).join(' · ')}</span> : null}
      </p>
      <QuietButton onClick={onCopy}>Copy its address</QuietButton>
      {onClear ? <QuietButton onClick={onClear}>Let go</QuietButton> : null}
    </div>
  )
}
