// One recording from the first note to the last: MediaRecorder's pieces go into the store, and from there to the server.
import { freshId } from '@client/lib/ids'
import { holdRecording } from '@client/lib/piece-store'
import { createScope } from '@client/lib/scope'
import { bitsPerSecond, chooseMime } from './mime'
import { createPieceSender, type PieceSender, type RecordingServer } from './piece-sender'
import { type Begun, browserPieceStore, type RecordingStore } from './piece-store'

export type RecordingState = 'recording' | 'paused' | 'stopping' | 'stopped'

export interface RecordingView {
  state: RecordingState
  fault: string | null
}

export interface Recording {
  readonly id: string
  /** null before signing in: nothing is sent then. */
  readonly sender: PieceSender | null
  view(): RecordingView
  subscribe(listener: () => void): () => void
  /** Seconds of sound so far, pauses left out. */
  lengthSec(): number
  pause(): void
  resume(): void
  /** Resolves when the last piece is in the store. */
  stop(): Promise<void>
  /** Everything recorded, as one file. */
  file(): File
  pieces(): number
  /** Forgets it here (the server is told by whoever keeps or drops it). */
  forget(): Promise<void>
  /** Ends it where it is; what was recorded can be found as unfinished. */
  dispose(): void
}

interface Deps {
  stream: MediaStream
  channels: number
  owner: { ownerId: string; groupId: string } | null
  store?: RecordingStore
  server?: RecordingServer
  /** ms since 1970. */
  now?: () => number
}

/** A piece is handed over this often, ms: what a dead battery can cost. */
export const pieceMs = 2000

export const startRecording = (deps: Deps): Recording => {
  const { stream, channels, owner, store = browserPieceStore, now = Date.now } = deps
  const id = freshId()
  const scope = createScope()
  const listeners = new Set<() => void>()
  const mime = chooseMime((type) => MediaRecorder.isTypeSupported(type))
  const recorder = new MediaRecorder(stream, {
    ...(mime ? { mimeType: mime } : {}),
    audioBitsPerSecond: bitsPerSecond(channels)
  })
  const type = recorder.mimeType || mime || 'audio/webm'
  const release = holdRecording(id)
  const kept: Blob[] = []
  let view: RecordingView = { state: 'recording', fault: null }
  let playedMs = 0
  let runningSinceMs: number | null = now()
  let writing: Promise<void> = Promise.resolve()
  let stopped = (): void => undefined
  const hasStopped = new Promise<void>((resolve) => {
    stopped = resolve
  })
  const lengthSec = (): number => (playedMs + (runningSinceMs === null ? 0 : now() - runningSinceMs)) / 1000
  const begun: Begun = {
    id,
    ownerId: owner?.ownerId ?? null,
    groupId: owner?.groupId ?? null,
    mime: type,
    startedMs: now(),
    pieces: 0,
    lengthSec: 0
  }
  const sender = owner
    ? createPieceSender({
        begun: { id, groupId: owner.groupId, mime: type, pieces: 0 },
        store: {
          // What is in memory is at hand even where IndexedDB is not.
          piece: (ofId, index) => Promise.resolve(ofId === id ? (kept[index] ?? null) : null),
          removePiece: store.removePiece
        },
        ...(deps.server ? { server: deps.server } : {})
      })
    : null

  const change = (part: Partial<RecordingView>): void => {
    view = { ...view, ...part }
    for (const listener of listeners) listener()
  }
  const halt = (): void => {
    if (runningSinceMs !== null) playedMs += now() - runningSinceMs
    runningSinceMs = null
  }

  scope.listen(recorder, 'dataavailable', (event) => {
    const { data } = event as BlobEvent
    if (data.size === 0) return
    const index = kept.push(data) - 1
    const told = { ...begun, pieces: index + 1, lengthSec: lengthSec() }
    writing = writing.then(async () => {
      await store.putPiece(id, index, data)
      await store.putBegun(told)
      sender?.made(index)
    })
  })
  scope.listen(recorder, 'stop', () => {
    halt()
    void writing.then(() => {
      change({ state: 'stopped' })
      stopped()
    })
  })
  scope.listen(recorder, 'error', () =>
    change({ fault: 'The browser stopped recording. What was recorded until now is kept.' })
  )
  for (const track of stream.getAudioTracks()) {
    // Unplugged, or taken away by the system: the recorder stops by itself.
    scope.listen(track, 'ended', () => change({ fault: 'The input went away. What was recorded until then is kept.' }))
  }
  scope.listen(document, 'visibilitychange', () => {
    // A page that goes to sleep may not wake: hand over what there is.
    if (document.visibilityState === 'hidden' && recorder.state === 'recording') recorder.requestData()
  })
  scope.listen(window, 'beforeunload', (event) => {
    if (view.state !== 'stopped') event.preventDefault()
  })
  if (sender) scope.listen(window, 'online', sender.wake)
  recorder.start(pieceMs)

  const end = (): void => {
    scope.dispose()
    listeners.clear()
    release()
  }
  return {
    id,
    sender,
    view: () => view,
    subscribe: (listener) => {
      listeners.add(listener)
      return () => listeners.delete(listener)
    },
    lengthSec,
    pause: () => {
      if (recorder.state !== 'recording') return
      recorder.pause()
      recorder.requestData()
      halt()
      change({ state: 'paused' })
    },
    resume: () => {
      if (recorder.state !== 'paused') return
      recorder.resume()
      runningSinceMs = now()
      change({ state: 'recording' })
    },
    stop: () => {
      if (recorder.state !== 'inactive') {
        change({ state: 'stopping' })
        recorder.stop()
      }
      return hasStopped
    },
    file: () =>
      new File(kept, `Recording${type.includes('mp4') ? '.m4a' : '.webm'}`, { type: type.split(';')[0] ?? type }),
    pieces: () => kept.length,
    forget: async () => {
      await writing
      sender?.dispose()
      end()
      await store.remove(id)
    },
    dispose: () => {
      const finish = (): void => {
        sender?.dispose()
        end()
      }
      if (recorder.state === 'inactive') return finish()
      // The last piece comes after the stop; the lock is let go of once it is written.
      recorder.stop()
      void hasStopped.then(finish)
    }
  }
}
