import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { RelativeTime } from '@client/ui/relative-time'
import { dropTrial, type Trial } from './trial-store'

/** A recording that was opened here and neither kept nor thrown away. */
export function LeftHere({ trial, onOpen }: { trial: Trial; onOpen: () => void }) {
  return (
    <Notice
      title={`${trial.file.name} is still here`}
      next={
        <>
          <Button onClick={onOpen}>Open it</Button>
          <Button look="quiet" icon="bin" onClick={dropTrial}>
            Throw it away
          </Button>
        </>
      }
    >
      You opened it <RelativeTime at={new Date(trial.openedMs).toISOString()} />. It is in this browser only, for a day.
    </Notice>
  )
}
