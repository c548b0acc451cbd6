// What is said of a recording made here, when it is kept.
import { useId, useState } from 'react'
import type { Group } from '@shared/contracts/groups'
import type { KeepSlot } from '@client/features/recorder/recorder'
import { KeepForm } from '@client/features/uploads/keep-form'
import { Button, type ButtonLook } from '@client/ui/button'
import { Notice } from '@client/ui/notice'

export interface KeepRecordedProps extends KeepSlot {
  group: Group | undefined
  /** `plain` where something else on the screen is the brass one. */
  look?: ButtonLook
}

export function KeepRecorded({ isBusy, fault, onKeep, onBack, group, look = 'primary' }: KeepRecordedProps) {
  const formId = useId()
  const [title] = useState(
    () => `Recorded ${new Date().toLocaleDateString(undefined, { day: 'numeric', month: 'long' })}`
  )
  return (
    <div className="grid gap-4">
      {fault ? <Notice kind="fault">{fault}</Notice> : null}
      <KeepForm
        key={group?.id ?? ''}
        formId={formId}
        isGroupFixed
        groups={group ? [group] : []}
        recordings={[{ key: 'recorded', title, says: null }]}
        onKeep={([kept]) => {
          if (!kept) return
          const { title: named, tuneId, reach } = kept.details
          onKeep({ title: named, reach, ...(tuneId ? { tuneId } : {}) })
        }}
      />
      <div className="flex flex-wrap gap-3">
        <Button look={look} type="submit" form={formId} busy={isBusy}>
          Keep it
        </Button>
        <Button look="quiet" onClick={onBack}>
          Back
        </Button>
      </div>
    </div>
  )
}
