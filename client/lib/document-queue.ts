// One's own edits of a document on their way to the server: shown at once, sent one after the other, kept until acknowledged.
import type { DocumentKind } from '@shared/documents/document'
import { applyAll } from '@shared/documents/merge'
import { ApiProblem } from '@client/lib/api'

export interface DocumentState<Body> {
  id: string
  revision: number
  body: Body
  canUndo: boolean
  canRedo: boolean
}
export interface PendingEdit<Op> {
  id: string
  operations: Op[]
}
export interface RefusedEdit<Op> {
  edit: PendingEdit<Op>
  /** In words for the person: a conflict with somebody else, or a fault in the edit. */
  message: string
  isConflict: boolean
}

interface Deps<Body, Op> {
  kind: DocumentKind<Body, Op>
  send(input: PendingEdit<Op> & { baseRevision: number }): Promise<DocumentState<Body>>
  keep(edit: PendingEdit<Op>): Promise<void>
  forget(id: string): Promise<void>
  onChange(): void
  /** A new state from the server. */
  onState(state: DocumentState<Body>): void
  onRefused(refused: RefusedEdit<Op>): void
  wait(ms: number): Promise<void>
}

export const createDocumentQueue = <Body, Op>(deps: Deps<Body, Op>) => {
  const { kind, send, keep, forget, onChange, onState, onRefused, wait } = deps
  let server: DocumentState<Body> | null = null
  let pending: PendingEdit<Op>[] = []
  let isSending = false
  let isOver = false
  let delayMs = 500
  /** The request under way, if there is one. What the server says meanwhile may or may not hold that edit already. */
  let inFlight: Promise<unknown> | null = null
  let heardMeanwhile: DocumentState<Body> | null = null

  const drop = (id: string): void => {
    pending = pending.filter((edit) => edit.id !== id)
    void forget(id)
    onChange()
  }

  const hearMeanwhile = (): void => {
    const state = heardMeanwhile
    heardMeanwhile = null
    if (!state || !server || state.revision <= server.revision) return
    server = state
    onState(state)
    onChange()
  }

  const drain = async (): Promise<void> => {
    if (isSending) return
    isSending = true
    for (;;) {
      if (isOver || !server || !pending[0]) break
      const edit = pending[0]
      try {
        const sending = send({ ...edit, baseRevision: server.revision })
        inFlight = sending
        const state = await sending.finally(() => {
          inFlight = null
        })
        delayMs = 500
        server = state
        onState(state)
        drop(edit.id)
        hearMeanwhile()
      } catch (error) {
        if (!(error instanceof ApiProblem)) throw error
        if (error.code === 'offline' || error.code === 'unavailable' || error.code === 'too-many') {
          await wait(delayMs)
          delayMs = Math.min(delayMs * 2, 8000)
          continue
        }
        const current = error.code === 'conflict' ? (error.body?.current as DocumentState<Body> | undefined) : undefined
        if (current && server) {
          server = { ...server, revision: current.revision, body: current.body }
          onState(server)
        }
        drop(edit.id)
        hearMeanwhile()
        onRefused({ edit, message: error.message, isConflict: error.code === 'conflict' })
      }
    }
    isSending = false
  }

  return {
    /** The body as the person sees it: the server's with their own unsent edits on top. */
    body: (): Body | null => {
      if (!server) return null
      return pending.reduce((body, edit) => {
        const applied = applyAll(kind, body, edit.operations)
        // What no longer fits is told when the server refuses it.
        return applied.ok ? applied.value.body : body
      }, server.body)
    },
    state: (): DocumentState<Body> | null => server,
    unsent: (): number => pending.length,
    /** A state that came from elsewhere; older ones than known are passed over. */
    receive: (state: DocumentState<Body>): void => {
      if (server && state.revision < server.revision) return
      if (inFlight) {
        heardMeanwhile = state
        return
      }
      server = state
      onChange()
      void drain()
    },
    /** Takes back the last edit that has not set out yet; false when there is none. */
    takeBack: (): boolean => {
      const last = pending.at(-1)
      if (!last || (pending.length === 1 && inFlight)) return false
      drop(last.id)
      return true
    },
    /** Resolves when no request is under way. */
    landed: async (): Promise<void> => {
      await inFlight?.catch(() => undefined)
    },
    restore: (edits: PendingEdit<Op>[]): void => {
      const known = new Set(pending.map((edit) => edit.id))
      pending = [...edits.filter((edit) => !known.has(edit.id)), ...pending]
      onChange()
      void drain()
    },
    push: (edit: PendingEdit<Op>): void => {
      pending = [...pending, edit]
      void keep(edit)
      onChange()
      void drain()
    },
    /** Sends what waits; also after `close`, as a component may come back with the same queue. */
    open: (): void => {
      isOver = false
      void drain()
    },
    close: (): void => {
      isOver = true
    }
  }
}
export type DocumentQueue<Body, Op> = ReturnType<typeof createDocumentQueue<Body, Op>>
