// A document on the screen: edits are seen at once, survive a reload and a lost connection, and can be taken back.
import { useEffect, useMemo, useReducer, useState } from 'react'
import { useQueryClient } from '@tanstack/react-query'
import type { DocumentKind } from '@shared/documents/document'
import type { RequestOf, RouteDef } from '@shared/contracts/route'
import { ApiProblem, callRoute } from '@client/lib/api'
import { createDocumentQueue, type DocumentState, type PendingEdit, type RefusedEdit } from '@client/lib/document-queue'
import { freshId } from '@client/lib/ids'
import { outbox } from '@client/lib/outbox'
import { routeKey, useRouteQuery } from '@client/lib/query'

interface DocumentRoutes {
  get: RouteDef
  edit: RouteDef
  undo: RouteDef
  redo: RouteDef
}

export interface DocumentSource<Body, Op> {
  kind: DocumentKind<Body, Op>
  routes: DocumentRoutes
  params: Record<string, string>
  /** Whose edits these are. `kind` and `routes` are the same objects on every render. */
  memberId: string
}

export interface LiveDocument<Body, Op> {
  /** Null until it has been read once. */
  body: Body | null
  revision: number
  unsent: number
  canUndo: boolean
  canRedo: boolean
  fault: ApiProblem | null
  /** The last edit that was not taken, until dismissed. */
  refused: RefusedEdit<Op> | null
  dismissRefused(): void
  edit(operations: Op[]): void
  undo(): Promise<void>
  redo(): Promise<void>
}

const wait = (ms: number): Promise<void> => new Promise((done) => setTimeout(done, ms))

export const useDocument = <Body, Op>({
  kind,
  routes,
  params,
  memberId
}: DocumentSource<Body, Op>): LiveDocument<Body, Op> => {
  const client = useQueryClient()
  const [, redraw] = useReducer((n: number) => n + 1, 0)
  const [refused, setRefused] = useState<RefusedEdit<Op> | null>(null)
  // The same words are the same document, whatever object they came in.
  const paramsText = JSON.stringify(params)
  const where = `${routes.get.path} ${paramsText}`
  const requestWith = useMemo(
    () =>
      (body?: unknown): RequestOf<RouteDef> =>
        ({ params: JSON.parse(paramsText), ...(body === undefined ? {} : { body }) }) as RequestOf<RouteDef>,
    [paramsText]
  )
  const query = useRouteQuery(routes.get, requestWith())
  const keep = useMemo(
    () => (state: unknown) => client.setQueryData(routeKey(routes.get, requestWith()), state),
    [client, routes, requestWith]
  )

  const queue = useMemo(
    () =>
      createDocumentQueue<Body, Op>({
        kind,
        send: (body) => callRoute(routes.edit, requestWith(body)) as Promise<DocumentState<Body>>,
        keep: (edit) => outbox.put(memberId, where, edit.id, edit),
        forget: (id) => outbox.remove(id),
        onChange: redraw,
        onState: keep,
        onRefused: setRefused,
        wait
      }),
    [kind, routes, where, memberId, requestWith, keep]
  )
  useEffect(() => {
    queue.open()
    void outbox.list<PendingEdit<Op>>(memberId, where).then((kept) => {
      if (kept.length > 0) queue.restore(kept.map(({ value }) => value))
    })
    return () => queue.close()
  }, [queue, memberId, where])
  const data = query.data as DocumentState<Body> | undefined
  useEffect(() => {
    if (data) queue.receive(data)
  }, [queue, data])

  const step = async (route: RouteDef): Promise<void> => {
    try {
      await queue.landed()
      keep(await callRoute(route, requestWith({ id: freshId() })))
    } catch (error) {
      if (!(error instanceof ApiProblem)) throw error
      if (error.code === 'nothing-to-undo') return
      setRefused({ edit: { id: '', operations: [] }, message: error.message, isConflict: error.code === 'conflict' })
    }
  }
  const state = queue.state() ?? data
  return {
    body: queue.body() ?? data?.body ?? null,
    revision: state?.revision ?? 0,
    unsent: queue.unsent(),
    canUndo: (state?.canUndo ?? false) || queue.unsent() > 0,
    canRedo: state?.canRedo ?? false,
    fault: query.error,
    refused,
    dismissRefused: () => setRefused(null),
    edit: (operations) => queue.push({ id: freshId(), operations }),
    undo: async () => {
      if (!queue.takeBack()) await step(routes.undo)
    },
    redo: () => step(routes.redo)
  }
}
