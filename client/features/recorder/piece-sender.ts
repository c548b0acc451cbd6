// Sends the pieces of one recording in order, each again until the server has it.
import { addressOf } from '@shared/contracts/route'
import { recordingRoutes } from '@shared/contracts/takes'
import { ApiProblem, callRoute, offlineProblem, parseAnswer, problemOf } from '@client/lib/api'
import { createScope } from '@client/lib/scope'
import type { Begun, RecordingStore } from './piece-store'

/** The server's side of a recording; a stand-in in tests. */
export interface RecordingServer {
  /** Begins it, or says how far an earlier beginning came. */
  start(begun: { id: string; groupId: string; mime: string }): Promise<{ nextPiece: number }>
  send(id: string, index: number, piece: Blob): Promise<{ nextPiece: number }>
}

export const recordingServer: RecordingServer = {
  start: ({ id, groupId, mime }) => callRoute(recordingRoutes.start, { params: { groupId }, body: { id, mime } }),
  send: async (id, index, piece) => {
    const def = recordingRoutes.piece
    let response: Response
    try {
      response = await fetch(addressOf(def, { params: { recordingId: id, index: String(index) } }), {
        method: def.method,
        credentials: 'same-origin',
        headers: { 'Content-Type': 'application/octet-stream' },
        body: piece
      })
    } catch {
      throw offlineProblem()
    }
    const text = await response.text()
    if (!response.ok) throw problemOf(response.status, text)
    return parseAnswer(def, JSON.parse(text))
  }
}

export interface SenderView {
  /** Pieces the server has acknowledged. */
  sent: number
  /** Pieces there are. */
  made: number
  /** How the way to the server is: `refused` is final, the rest mends itself. */
  way: 'open' | 'offline' | 'refused'
  fault: string | null
}

export interface PieceSender {
  /** A further piece lies in the store. */
  made(index: number): void
  view(): SenderView
  subscribe(listener: () => void): () => void
  /** The connection may be back. */
  wake(): void
  /** Resolves when every piece made so far has arrived; rejects when they never will. */
  drained(): Promise<void>
  dispose(): void
}

const waitsMs = [500, 1000, 2000, 4000, 8000]
const passing = new Set<ApiProblem['code']>(['offline', 'unavailable', 'too-many', 'internal'])

interface Deps {
  begun: Pick<Begun, 'id' | 'mime' | 'pieces'> & { groupId: string }
  store: Pick<RecordingStore, 'piece' | 'removePiece'>
  server?: RecordingServer
}

export const createPieceSender = ({ begun, store, server = recordingServer }: Deps): PieceSender => {
  const { id, groupId, mime } = begun
  const scope = createScope()
  const listeners = new Set<() => void>()
  let view: SenderView = { sent: 0, made: begun.pieces, way: 'open', fault: null }
  /** null until the server has said where it stands. */
  let next: number | null = null
  let isAtWork = false
  let tries = 0
  let cancelWait = (): void => undefined

  const change = (part: Partial<SenderView>): void => {
    view = { ...view, ...part }
    for (const listener of listeners) listener()
  }

  const isBehind = (): boolean => next === null || next < view.made
  const step = async (): Promise<void> => {
    if (next === null) {
      next = (await server.start({ id, groupId, mime })).nextPiece
      change({ sent: Math.min(next, view.made), way: 'open', fault: null })
      return
    }
    const piece = await store.piece(id, next)
    if (!piece) throw new ApiProblem('gone', 'A piece of this recording is missing on this computer.', null)
    const index = next
    // The server's count is the truth: after a lost answer it is already one further.
    next = Math.max(index + 1, (await server.send(id, index, piece)).nextPiece)
    await store.removePiece(id, index)
    change({ sent: Math.min(next, view.made), way: 'open', fault: null })
  }
  const work = async (): Promise<void> => {
    if (isAtWork || scope.disposed || view.way === 'refused') return
    isAtWork = true
    cancelWait()
    try {
      while (!scope.disposed && isBehind()) {
        await step()
        tries = 0
      }
    } catch (error) {
      handleFault(error)
    } finally {
      isAtWork = false
    }
    // A piece may have been made while the last answer was being looked at.
    if (view.way === 'open' && isBehind() && !scope.disposed) void work()
  }
  const handleFault = (error: unknown): void => {
    if (scope.disposed) return
    const problem = error instanceof ApiProblem ? error : null
    if (problem?.code === 'conflict') {
      // Somebody counts differently: ask the server where it stands.
      next = null
    } else if (!problem || !passing.has(problem.code)) {
      return change({ way: 'refused', fault: problem?.message ?? 'The recording could not be sent.' })
    }
    const waitMs = waitsMs[Math.min(tries, waitsMs.length - 1)] ?? 0
    tries += 1
    change({ way: 'offline', fault: problem?.message ?? null })
    cancelWait = scope.timeout(() => void work(), waitMs)
  }

  void work()
  return {
    made: (index) => {
      change({ made: Math.max(view.made, index + 1) })
      if (view.way === 'open') void work()
    },
    view: () => view,
    subscribe: (listener) => {
      listeners.add(listener)
      return () => listeners.delete(listener)
    },
    wake: () => void work(),
    drained: () =>
      new Promise((resolve, reject) => {
        const look = (): void => {
          const isThere = next !== null && view.sent >= view.made
          if (!isThere && view.way !== 'refused') return
          listeners.delete(look)
          if (isThere) resolve()
          else reject(new ApiProblem('internal', view.fault ?? 'The recording could not be sent.', null))
        }
        listeners.add(look)
        look()
      }),
    dispose: () => {
      scope.dispose()
      listeners.clear()
    }
  }
}
