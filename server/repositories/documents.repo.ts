import type { Db } from '@server/db/knex'
import type { DocumentEditRow } from '@server/db/tables'

export interface StoredDocument {
  id: string
  kind: string
  revision: number
  body: unknown
}
export interface StoredEdit {
  id: string
  documentId: string
  revision: number
  actorId: string | null
  operations: unknown[]
  inverse: unknown[]
  parts: string[]
  undoes: string | null
  redoes: string | null
}
export interface DocumentHome {
  tuneId?: string
  takeId?: string
}

const editColumns = [
  'id',
  'document_id',
  'revision',
  'actor_id',
  'operations',
  'inverse',
  'parts',
  'undoes',
  'redoes'
] as const
const toEdit = (row: Pick<DocumentEditRow, (typeof editColumns)[number]>): StoredEdit => ({
  id: row.id,
  documentId: row.document_id,
  revision: row.revision,
  actorId: row.actor_id,
  operations: row.operations,
  inverse: row.inverse,
  parts: row.parts,
  undoes: row.undoes,
  redoes: row.redoes
})
const homeColumns = (home: DocumentHome) => (home.tuneId ? { tune_id: home.tuneId } : { take_id: home.takeId ?? '' })

export const createDocumentsRepo = (db: Db) => ({
  find: async (kind: string, home: DocumentHome): Promise<StoredDocument | null> =>
    (await db('documents')
      .where({ kind, ...homeColumns(home) })
      .first('id', 'kind', 'revision', 'body')) ?? null,
  /** The document locked until the transaction ends; made empty where there is none yet. */
  lock: async (kind: string, home: DocumentHome, id: string, empty: unknown, trx: Db): Promise<StoredDocument> => {
    const row = { id, kind, ...homeColumns(home), revision: 0, body: JSON.stringify(empty) }
    await trx('documents').insert(row).onConflict().ignore()
    const found = await trx('documents')
      .where({ kind, ...homeColumns(home) })
      .forUpdate()
      .first('id', 'kind', 'revision', 'body')
    if (!found) throw new Error('the document that was just made is not there')
    return found
  },
  save: async (id: string, revision: number, body: unknown, trx: Db): Promise<void> => {
    await trx('documents')
      .where({ id })
      .update({ revision, body: JSON.stringify(body), updated_at: trx.fn.now() })
  },
  edit: async (id: string, trx: Db = db): Promise<StoredEdit | null> => {
    const row = await trx('document_edits')
      .where({ id })
      .first(...editColumns)
    return row ? toEdit(row) : null
  },
  editsAfter: async (documentId: string, revision: number, trx: Db = db): Promise<StoredEdit[]> => {
    const rows = await trx('document_edits')
      .where('document_id', documentId)
      .andWhere('revision', '>', revision)
      .orderBy('revision')
      .select(...editColumns)
    return rows.map(toEdit)
  },
  /** A person's own edits of a document, newest first: the history that undo and redo walk. */
  editsOf: async (documentId: string, actorId: string, limit: number, trx: Db = db): Promise<StoredEdit[]> => {
    const rows = await trx('document_edits')
      .where({ document_id: documentId, actor_id: actorId })
      .orderBy('revision', 'desc')
      .limit(limit)
      .select(...editColumns)
    return rows.map(toEdit)
  },
  addEdit: async (edit: StoredEdit, trx: Db): Promise<void> => {
    await trx('document_edits').insert({
      id: edit.id,
      document_id: edit.documentId,
      revision: edit.revision,
      actor_id: edit.actorId,
      operations: JSON.stringify(edit.operations) as unknown as unknown[],
      inverse: JSON.stringify(edit.inverse) as unknown as unknown[],
      parts: edit.parts,
      undoes: edit.undoes,
      redoes: edit.redoes
    })
  }
})
export type DocumentsRepo = ReturnType<typeof createDocumentsRepo>
