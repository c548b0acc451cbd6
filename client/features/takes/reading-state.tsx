import { useState } from 'react'
import type { Take } from '@shared/contracts/takes'
import { useRemoveTake, useRetryTake } from '@client/features/takes/api'
import { Button } from '@client/ui/button'
import { Dialog } from '@client/ui/dialog'
import { Notice } from '@client/ui/notice'
import { Progress } from '@client/ui/progress'

export interface ReadingStateProps {
  take: Take
  onRemoved: () => void
}

/** What stands in the place of the lanes while a recording is being read, or when it could not be. */
export function ReadingState({ take, onRemoved }: ReadingStateProps) {
  if (take.state === 'failed') return <Failed take={take} onRemoved={onRemoved} />
  const isWaiting = take.state === 'waiting'
  return (
    <Progress
      stage={isWaiting ? 'Waiting for its turn to be read' : (take.stage ?? 'Reading the recording')}
      percent={isWaiting ? null : take.progress * 100}
      note="You can leave this page: the reading goes on, and the take plays as soon as it is done."
    />
  )
}

function Failed({ take, onRemoved }: ReadingStateProps) {
  const retry = useRetryTake()
  const remove = useRemoveTake()
  const [isAsking, setAsking] = useState(false)
  const problem = retry.error ?? remove.error
  const params = { takeId: take.id }
  return (
    <div className="grid gap-3">
      <Notice
        kind="fault"
        title="This recording could not be read"
        next={
          <>
            {take.abilities.includes('take:edit') ? (
              <Button busy={retry.isPending} onClick={() => retry.mutate({ params })}>
                Try again
              </Button>
            ) : null}
            {take.abilities.includes('take:delete') ? (
              <Button look="quiet" icon="bin" onClick={() => setAsking(true)}>
                Delete it
              </Button>
            ) : null}
          </>
        }
      >
        {take.fault ?? 'Something went wrong while it was being read.'}
      </Notice>
      {problem ? <Notice kind="fault">{problem.message}</Notice> : null}
      {isAsking ? (
        <Dialog
          title={`Delete ${take.title}?`}
          onClose={() => setAsking(false)}
          actions={
            <>
              <Button look="quiet" onClick={() => setAsking(false)}>
                Keep it
              </Button>
              <Button busy={remove.isPending} onClick={() => remove.mutate({ params }, { onSuccess: onRemoved })}>
                Delete the take
              </Button>
            </>
          }
        >
          <p>The recording and all that was written about it go. This cannot be taken back.</p>
        </Dialog>
      ) : null}
    </div>
  )
}
