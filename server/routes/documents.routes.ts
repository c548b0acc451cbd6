// The four routes of every document, over the one document service.
import type { DocumentKind } from '@shared/documents/document'
import type { Actor } from '@server/http/handlers'
import type { DocumentPlace, DocumentService } from '@server/services/documents.service'

interface Source<Body, Op, Params> {
  documents: DocumentService
  kind: DocumentKind<Body, Op>
  place(actor: Actor, params: Params): Promise<DocumentPlace>
}

interface Asked<Params> {
  actor: Actor
  params: Params
}

export const documentHandlers = <Body, Op, Params>({ documents, kind, place }: Source<Body, Op, Params>) => ({
  get: async ({ actor, params }: Asked<Params>) => documents.get(kind, await place(actor, params), actor),
  edit: async ({
    actor,
    params,
    body
  }: Asked<Params> & { body: { id: string; baseRevision: number; operations: Op[] } }) =>
    documents.edit(kind, await place(actor, params), actor, body),
  undo: async ({ actor, params, body }: Asked<Params> & { body: { id: string } }) =>
    documents.undo(kind, await place(actor, params), actor, body.id),
  redo: async ({ actor, params, body }: Asked<Params> & { body: { id: string } }) =>
    documents.redo(kind, await place(actor, params), actor, body.id)
})
