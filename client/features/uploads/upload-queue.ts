// Recordings on their way to the server, two at a time. Lives above the router, so that walking about stops nothing.
import type { Take } from '@shared/contracts/takes'
import { ApiProblem } from '@client/lib/api'
import { createScope } from '@client/lib/scope'
import { faultOfFile } from './check-file'
import type { SendUpload, Upload, UploadJob } from './upload-types'

export interface UploadQueue {
  add(jobs: readonly UploadJob[]): void
  /** A take that came in another way (recorded here): listed while it is being read. */
  addSent(ownerId: string, take: Take): void
  cancel(id: string): void
  retry(id: string): void
  /** The connection may be back: what waits for it is tried at once. */
  wake(): void
  /** The same array until something changes. */
  list(): readonly Upload[]
  subscribe(listener: () => void): () => void
  /** Something would be lost if the page closed now. */
  isBusy(): boolean
  dispose(): void
}

interface Deps {
  send: SendUpload
  onSent?: (take: Take) => void
  atOnce?: number
}

interface Entry {
  job: UploadJob | null
  view: Upload
  abort: AbortController | null
  /** Tries that ended on the way. */
  tries: number
  cancelWait: () => void
}

const defaultAtOnce = 2
/** Waits between tries that the connection ended, ms; the last one repeats. */
const waitsMs = [1000, 2000, 4000, 8000, 15_000, 30_000]
/** Progress is shown no finer than this share of the file: a redraw per packet helps nobody. */
const shownStep = 1 / 200

/** What the same bytes will be refused for again. */
const finalCodes = new Set<ApiProblem['code']>(['not-audio', 'too-large', 'invalid', 'not-found', 'forbidden'])
const passingCodes = new Set<ApiProblem['code']>(['offline', 'unavailable', 'too-many'])

export const createUploadQueue = ({ send, onSent, atOnce = defaultAtOnce }: Deps): UploadQueue => {
  const scope = createScope()
  const entries = new Map<string, Entry>()
  const listeners = new Set<() => void>()
  let shown: readonly Upload[] = []

  const publish = (): void => {
    shown = [...entries.values()].map(({ view }) => view)
    for (const listener of listeners) listener()
  }
  const change = (entry: Entry, next: Partial<Upload>): void => {
    entry.view = { ...entry.view, ...next }
    publish()
  }
  const enter = (view: Upload, job: UploadJob | null): void => {
    entries.set(view.id, { job, view, abort: null, tries: 0, cancelWait: () => undefined })
  }

  const handleFault = (entry: Entry, error: unknown): void => {
    if (!(error instanceof ApiProblem)) {
      return change(entry, { state: 'failed', fault: 'Something went wrong while sending it.', canRetry: true })
    }
    if (!passingCodes.has(error.code)) {
      return change(entry, { state: 'failed', fault: wordsOf(error), canRetry: !finalCodes.has(error.code) })
    }
    const waitMs = waitsMs[Math.min(entry.tries, waitsMs.length - 1)]
    entry.tries += 1
    entry.cancelWait = scope.timeout(() => begin(entry), waitMs ?? 0)
    const fault =
      error.code === 'offline'
        ? 'The server cannot be reached. It goes on by itself.'
        : `${wordsOf(error)} It goes on by itself.`
    change(entry, { state: 'offline', fault, sentBytes: 0 })
  }

  const run = async (entry: Entry, job: UploadJob): Promise<void> => {
    const abort = new AbortController()
    entry.abort = abort
    change(entry, { state: 'sending', fault: null, sentBytes: 0 })
    try {
      const take = await send(
        job,
        (bytes) => {
          const { sentBytes, bytes: whole } = entry.view
          if (bytes === whole || Math.abs(bytes - sentBytes) >= whole * shownStep) change(entry, { sentBytes: bytes })
        },
        abort.signal
      )
      // The file is let go of: only its name is shown from here on.
      entry.job = null
      change(entry, { state: 'sent', sentBytes: entry.view.bytes, take })
      job.onSent?.()
      onSent?.(take)
    } catch (error) {
      if (!abort.signal.aborted) handleFault(entry, error)
    } finally {
      entry.abort = null
      next()
    }
  }
  const next = (): void => {
    if (scope.disposed) return
    const all = [...entries.values()]
    let free = atOnce - all.filter(({ view }) => view.state === 'sending').length
    for (const entry of all) {
      if (free <= 0) return
      if (entry.view.state !== 'waiting' || !entry.job) continue
      free -= 1
      void run(entry, entry.job)
    }
  }
  const begin = (entry: Entry): void => {
    entry.cancelWait()
    if (!entry.job) return
    change(entry, { state: 'waiting', fault: null })
    next()
  }

  return {
    add: (jobs) => {
      for (const job of jobs) {
        if (entries.has(job.id)) continue
        const fault = faultOfFile(job.file)
        enter(
          {
            id: job.id,
            ownerId: job.ownerId,
            title: job.details.title,
            fileName: job.file.name,
            bytes: job.file.size,
            sentBytes: 0,
            state: fault ? 'failed' : 'waiting',
            fault,
            canRetry: false,
            take: null
          },
          fault ? null : job
        )
      }
      publish()
      next()
    },
    addSent: (ownerId, take) => {
      const { id, title } = take
      const none = { fileName: '', bytes: 0, sentBytes: 0, fault: null, canRetry: false }
      enter({ id, ownerId, title, ...none, state: 'sent', take }, null)
      publish()
    },
    cancel: (id) => {
      const entry = entries.get(id)
      if (!entry) return
      entry.cancelWait()
      entries.delete(id)
      entry.abort?.abort()
      publish()
    },
    retry: (id) => {
      const entry = entries.get(id)
      if (!entry || (entry.view.state !== 'failed' && entry.view.state !== 'offline')) return
      entry.tries = 0
      begin(entry)
    },
    wake: () => {
      for (const entry of entries.values()) if (entry.view.state === 'offline') begin(entry)
    },
    list: () => shown,
    subscribe: (listener) => {
      listeners.add(listener)
      return () => listeners.delete(listener)
    },
    isBusy: () => shown.some(({ state }) => state === 'waiting' || state === 'sending' || state === 'offline'),
    dispose: () => {
      scope.dispose()
      for (const { abort } of entries.values()) abort?.abort()
      listeners.clear()
    }
  }
}

const wordsOf = (problem: ApiProblem): string =>
  problem.fields.length > 0 ? problem.fields.map(({ message }) => message).join(' ') : problem.message
