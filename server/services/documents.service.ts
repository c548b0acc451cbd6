// The one mechanism behind everything that people edit: merge or conflict, undo and redo of one's own edits.
import { randomUUID } from 'node:crypto'
import type { DocumentKind } from '@shared/documents/document'
import { nextInHistory } from '@shared/documents/history'
import { applyAll, overlap } from '@shared/documents/merge'
import type { GroupEventType } from '@shared/contracts/group-events'
import { problem } from '@shared/errors/problems'
import type { Db } from '@server/db/knex'
import type { Actor } from '@server/http/handlers'
import type { DocumentHome, DocumentsRepo, StoredDocument, StoredEdit } from '@server/repositories/documents.repo'
import type { EventsRepo } from '@server/repositories/events.repo'

/** How far back undo and redo look into one's own edits. */
const historyDepth = 500

export interface DocumentState<Body> {
  id: string
  revision: number
  body: Body
  canUndo: boolean
  canRedo: boolean
}

export interface DocumentPlace {
  groupId: string
  home: DocumentHome
  /** What the group is told. */
  event: GroupEventType
  /** Called in the edit's transaction; throws a problem where rights were lost meanwhile. */
  recheck(trx: Db): Promise<void>
}

interface EditInput<Op> {
  /** Made by the client. */
  id: string
  baseRevision: number
  operations: Op[]
}

interface Deps {
  db: Db
  documents: DocumentsRepo
  events: EventsRepo
}

export const createDocumentService = ({ db, documents, events }: Deps) => {
  const stateOf = async <Body>(actor: Actor, stored: StoredDocument, trx: Db = db): Promise<DocumentState<Body>> => {
    const next = nextInHistory(await documents.editsOf(stored.id, actor.id, historyDepth, trx))
    return {
      id: stored.id,
      revision: stored.revision,
      body: stored.body as Body,
      canUndo: next.undo !== null,
      canRedo: next.redo !== null
    }
  }

  /** Applies operations to the locked document and writes edit, document and event. */
  const write = async <Body, Op>(
    kind: DocumentKind<Body, Op>,
    place: Omit<DocumentPlace, 'recheck'>,
    actor: Actor,
    stored: StoredDocument,
    edit: Pick<StoredEdit, 'id' | 'undoes' | 'redoes'> & { operations: Op[] },
    trx: Db
  ): Promise<StoredDocument> => {
    const applied = applyAll(kind, stored.body as Body, edit.operations)
    if (!applied.ok) {
      const { index, message, path = [] } = applied.error
      throw problem('invalid', {
        detail: message,
        errors: [{ in: 'body', path: ['operations', index, ...path].join('.'), message }]
      })
    }
    const revision = stored.revision + 1
    await documents.save(stored.id, revision, applied.value.body, trx)
    await documents.addEdit(
      {
        ...edit,
        documentId: stored.id,
        revision,
        actorId: actor.id,
        inverse: applied.value.inverse,
        parts: applied.value.parts
      },
      trx
    )
    await events.add(
      {
        groupId: place.groupId,
        type: place.event,
        objectId: stored.id,
        takeId: place.home.takeId ?? null,
        actorId: actor.id
      },
      trx
    )
    return { ...stored, revision, body: applied.value.body }
  }

  const inTransaction = <T>(place: DocumentPlace, work: (trx: Db) => Promise<T>): Promise<T> =>
    db.transaction(async (trx) => {
      await place.recheck(trx)
      return work(trx)
    })

  /** An edit inside the caller's transaction; who may do it was settled by the caller. */
  const editIn = async <Body, Op>(
    kind: DocumentKind<Body, Op>,
    place: Omit<DocumentPlace, 'recheck'>,
    actor: Actor,
    input: EditInput<Op>,
    trx: Db
  ): Promise<DocumentState<Body>> => {
    const stored = await documents.lock(kind.name, place.home, randomUUID(), kind.empty, trx)
    if (await alreadyDone(input.id, stored, actor, trx)) return stateOf<Body>(actor, stored, trx)
    if (input.baseRevision > stored.revision)
      throw problem('invalid', { detail: 'This edit was made on a revision that does not exist.' })
    if (input.baseRevision < stored.revision) {
      const since = await documents.editsAfter(stored.id, input.baseRevision, trx)
      const mine = input.operations.flatMap((op) => kind.parts(stored.body as Body, op))
      const touched = since.filter((edit) => overlap(edit.parts, mine))
      if (touched.length > 0) throw conflict(stored, touched)
    }
    const edit = { id: input.id, operations: input.operations, undoes: null, redoes: null }
    return stateOf<Body>(actor, await write(kind, place, actor, stored, edit, trx), trx)
  }

  const step = <Body, Op>(
    kind: DocumentKind<Body, Op>,
    place: DocumentPlace,
    actor: Actor,
    id: string,
    way: 'undo' | 'redo'
  ) =>
    inTransaction(place, async (trx): Promise<DocumentState<Body>> => {
      const stored = await documents.lock(kind.name, place.home, randomUUID(), kind.empty, trx)
      if (await alreadyDone(id, stored, actor, trx)) return stateOf<Body>(actor, stored, trx)
      const target = nextInHistory(await documents.editsOf(stored.id, actor.id, historyDepth, trx))[way]
      const original = target === null ? null : await documents.edit(target, trx)
      if (!original) throw problem('nothing-to-undo')
      const source = way === 'undo' ? await lastForm(original, actor, trx) : original
      const others = (await documents.editsAfter(stored.id, source.revision, trx)).filter(
        (edit) => edit.actorId !== actor.id
      )
      const touched = others.filter((edit) => overlap(edit.parts, source.parts))
      if (touched.length > 0) throw conflict(stored, touched, 'Somebody else has changed that place since.')
      const operations = (way === 'undo' ? source.inverse : original.operations) as Op[]
      const edit = {
        id,
        operations,
        undoes: way === 'undo' ? original.id : null,
        redoes: way === 'redo' ? original.id : null
      }
      return stateOf<Body>(actor, await write(kind, place, actor, stored, edit, trx), trx)
    })

  /** An edit that was taken back and done again is undone by the inverse of its latest doing. */
  const lastForm = async (original: StoredEdit, actor: Actor, trx: Db): Promise<StoredEdit> => {
    const own = await documents.editsOf(original.documentId, actor.id, historyDepth, trx)
    return own.find((edit) => edit.redoes === original.id) ?? original
  }

  /** The same edit sent twice (a lost answer, an impatient client) is applied once. */
  const alreadyDone = async (id: string, stored: StoredDocument, actor: Actor, trx: Db): Promise<boolean> => {
    const before = await documents.edit(id, trx)
    if (!before) return false
    if (before.documentId !== stored.id || before.actorId !== actor.id) throw problem('already-there')
    return true
  }

  const conflict = (stored: StoredDocument, touched: StoredEdit[], detail?: string) =>
    problem('conflict', {
      ...(detail ? { detail } : {}),
      current: { id: stored.id, revision: stored.revision, body: stored.body },
      theirs: touched.map((edit) => ({
        id: edit.id,
        revision: edit.revision,
        authorId: edit.actorId,
        operations: edit.operations
      }))
    })

  return {
    get: async <Body, Op>(
      kind: DocumentKind<Body, Op>,
      place: Pick<DocumentPlace, 'home'>,
      actor: Actor
    ): Promise<DocumentState<Body>> => {
      const stored =
        (await documents.find(kind.name, place.home)) ??
        (await db.transaction((trx) => documents.lock(kind.name, place.home, randomUUID(), kind.empty, trx)))
      return stateOf<Body>(actor, stored)
    },
    edit: <Body, Op>(
      kind: DocumentKind<Body, Op>,
      place: DocumentPlace,
      actor: Actor,
      input: EditInput<Op>
    ): Promise<DocumentState<Body>> => inTransaction(place, (trx) => editIn(kind, place, actor, input, trx)),
    editIn,
    undo: <Body, Op>(kind: DocumentKind<Body, Op>, place: DocumentPlace, actor: Actor, id: string) =>
      step(kind, place, actor, id, 'undo'),
    redo: <Body, Op>(kind: DocumentKind<Body, Op>, place: DocumentPlace, actor: Actor, id: string) =>
      step(kind, place, actor, id, 'redo')
  }
}
export type DocumentService = ReturnType<typeof createDocumentService>
