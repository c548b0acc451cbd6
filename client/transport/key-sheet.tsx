import type { ReactNode } from 'react'
import { Checkbox } from '@client/ui/checkbox'
import { Dialog } from '@client/ui/dialog'
import { hearingNote } from './hearing'
import { KeyList } from './key-list'
import type { KeyBinding } from './keys'

export interface KeySheetProps {
  map: readonly KeyBinding[]
  areOff: boolean
  /** Without it the switch is not shown. */
  onOff?: (areOff: boolean) => void
  /** Stands in place of the list: where keys can be changed, what changes them. */
  editor?: ReactNode
  onClose: () => void
}

/** All keys and pedals on one sheet. */
export function KeySheet({ map, areOff, onOff, editor, onClose }: KeySheetProps) {
  return (
    <Dialog title="Keys and pedals" onClose={onClose}>
      {editor ?? <KeyList map={map} />}
      <p className="mt-4 text-sm text-pencil">
        A pedal sends the arrow or page keys: page up goes back a bar, page down plays or pauses, unless you give them
        something else to do. Keys rest while you write.
      </p>
      {onOff ? (
        <div className="mt-3">
          <Checkbox label="Single keys are off" checked={areOff} onChange={onOff} hint="Keys with Ctrl stay on." />
        </div>
      ) : null}
      <p className="mt-4 text-sm text-pencil">{hearingNote}</p>
    </Dialog>
  )
}
