import type { ReactNode } from 'react'
import { Button } from '@client/ui/button'
import { Notice } from '@client/ui/notice'
import { Progress } from '@client/ui/progress'
import { bytesWords } from './bytes-words'
import { useUploadQueue, useUploads } from './provider'
import type { Upload } from './upload-types'

export interface UploadListProps {
  ownerId: string
  /** What stands for a take the server has: how far it is read, and the way to open it. */
  renderTake: (takeId: string, onDone: () => void) => ReactNode
}

/** Recordings on their way, and being read after they have arrived. */
export function UploadList({ ownerId, renderTake }: UploadListProps) {
  const queue = useUploadQueue()
  const uploads = useUploads(ownerId)
  if (uploads.length === 0) return null
  return (
    <ul aria-label="Recordings on their way" className="grid gap-px border border-rule bg-rule">
      {uploads.map((upload) => (
        <li key={upload.id} className="grid gap-2 bg-sheet px-4 py-3">
          {upload.take ? (
            renderTake(upload.take.id, () => queue.cancel(upload.id))
          ) : (
            <UploadRow
              upload={upload}
              onCancel={() => queue.cancel(upload.id)}
              onRetry={() => queue.retry(upload.id)}
            />
          )}
        </li>
      ))}
    </ul>
  )
}

function UploadRow({ upload, onCancel, onRetry }: { upload: Upload; onCancel: () => void; onRetry: () => void }) {
  const { title, fileName, bytes, sentBytes, state, fault } = upload
  const name = <p className="font-semibold break-words">{title}</p>
  if (state === 'failed') {
    return (
      <>
        {name}
        <Notice
          kind="fault"
          next={
            <>
              {upload.canRetry ? <Button onClick={onRetry}>Try again</Button> : null}
              <Button look="quiet" onClick={onCancel}>
                Take it off the list
              </Button>
            </>
          }
        >
          {fault}
        </Notice>
      </>
    )
  }
  const isWhole = bytes > 0 && sentBytes >= bytes
  const stage =
    state === 'offline' ? 'Waiting for the connection' : state === 'waiting' ? 'Waiting for its turn' : 'Sending'
  return (
    <>
      {name}
      <Progress
        stage={isWhole && state === 'sending' ? 'All of it is sent, the server is storing it' : stage}
        percent={state === 'sending' && !isWhole ? (sentBytes / Math.max(1, bytes)) * 100 : null}
        note={state === 'offline' ? fault : `${fileName} · ${bytesWords(sentBytes)} of ${bytesWords(bytes)}`}
        action={
          <span className="flex gap-1">
            {state === 'offline' ? (
              <Button look="quiet" onClick={onRetry}>
                Try now
              </Button>
            ) : null}
            <Button look="quiet" aria-label={`Cancel ${title}`} onClick={onCancel}>
              Cancel
            </Button>
          </span>
        }
      />
    </>
  )
}
