import type { ReactNode } from 'react'
import type { ApiProblem } from '@client/lib/api'
import { Button } from '@client/ui/button'
import { Dialog } from '@client/ui/dialog'
import { Notice } from '@client/ui/notice'

export interface SureDialogProps {
  title: string
  /** What happens, and what stays. */
  children: ReactNode
  /** The safe answer. */
  keep: string
  confirm: string
  isBusy: boolean
  problem: ApiProblem | null
  onConfirm: () => void
  onClose: () => void
}

/** Asks before something that has no way back. */
export function SureDialog({ title, children, keep, confirm, isBusy, problem, onConfirm, onClose }: SureDialogProps) {
  return (
    <Dialog
      title={title}
      onClose={onClose}
      actions={
        <>
          <Button onClick={onClose}>{keep}</Button>
          <Button busy={isBusy} onClick={onConfirm}>
            {confirm}
          </Button>
        </>
      }
    >
      <div className="grid gap-3">
        {problem ? <Notice kind="fault">{problem.message}</Notice> : null}
        <p className="break-words">{children}</p>
      </div>
    </Dialog>
  )
}
