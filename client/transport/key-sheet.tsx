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
  onClose: () => void
}

/** All keys and pedals on one sheet. */
export function KeySheet({ map, areOff, onOff, onClose }: KeySheetProps) {
  return (
    <Dialog title="Keys and pedals" onClose={onClose}>
      <KeyList map={map} />
      <p className="mt-4 text-sm text-pencil">
        A pedal that sends page keys goes back a bar with one foot and plays or pauses with the other. Keys rest while
        you write.
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
