import { createContext, useContext, useState, useSyncExternalStore, type ReactNode } from 'react'
import { useQueryClient } from '@tanstack/react-query'
import { takeRoutes } from '@shared/contracts/takes'
import { routeKey } from '@client/lib/query'
import { useScope } from '@client/lib/scope'
import { sendUpload } from './send-upload'
import { createUploadQueue, type UploadQueue } from './upload-queue'
import type { SendUpload, Upload } from './upload-types'

const QueueContext = createContext<UploadQueue | null>(null)

/** Stands above the router: uploads go on while the person walks about, and closing the page asks first. */
export function UploadsProvider({ send = sendUpload, children }: { send?: SendUpload; children: ReactNode }) {
  const client = useQueryClient()
  const [queue] = useState(() =>
    createUploadQueue({
      send,
      onSent: () => void client.invalidateQueries({ queryKey: routeKey(takeRoutes.list) })
    })
  )
  useScope(
    (scope) => {
      scope.listen(window, 'online', queue.wake)
      scope.listen(window, 'beforeunload', (event) => {
        if (queue.isBusy()) event.preventDefault()
      })
    },
    [queue]
  )
  return <QueueContext value={queue}>{children}</QueueContext>
}

export const useUploadQueue = (): UploadQueue => {
  const queue = useContext(QueueContext)
  if (!queue) throw new Error('UploadsProvider is missing above this component.')
  return queue
}

/** The uploads of one person, oldest first. */
export const useUploads = (ownerId: string): readonly Upload[] => {
  const queue = useUploadQueue()
  const all = useSyncExternalStore(queue.subscribe, queue.list)
  return all.filter((upload) => upload.ownerId === ownerId)
}
