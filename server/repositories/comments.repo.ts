import type { Comment, CommentKind, Reply } from '@shared/contracts/comments'
import { opens } from '@shared/contracts/comments'
import type { Db } from '@server/db/knex'
import type { CommentRow, ReplyRow } from '@server/db/tables'
import { person, personOrNull } from '@server/repositories/people'

/** Without abilities: those depend on who asks. */
export type StoredReply = Omit<Reply, 'abilities'>
export type StoredComment = Omit<Comment, 'abilities' | 'replies'> & { replies: StoredReply[] }

type JoinedComment = CommentRow & { author_name: string; settler_name: string | null }
type JoinedReply = ReplyRow & { author_name: string }

const toReply = (row: JoinedReply): StoredReply => ({
  id: row.id,
  commentId: row.comment_id,
  author: person(row.author_id, row.author_name),
  text: row.text,
  createdAt: row.created_at.toISOString(),
  updatedAt: row.updated_at.toISOString()
})
const toComment = (row: JoinedComment, replies: StoredReply[]): StoredComment => ({
  id: row.id,
  takeId: row.take_id,
  author: person(row.author_id, row.author_name),
  kind: row.kind,
  text: row.text,
  startSec: row.start_sec,
  endSec: row.end_sec,
  isOpen: opens(row.kind) && row.settled_at === null,
  settledBy: personOrNull(row.settled_by, row.settler_name),
  settledAt: row.settled_at?.toISOString() ?? null,
  createdAt: row.created_at.toISOString(),
  updatedAt: row.updated_at.toISOString(),
  replies
})

const commentColumns = [
  'comments.id',
  'comments.take_id',
  'comments.author_id',
  'comments.kind',
  'comments.text',
  'comments.start_sec',
  'comments.end_sec',
  'comments.settled_at',
  'comments.settled_by',
  'comments.created_at',
  'comments.updated_at',
  'author.name as author_name',
  'settler.name as settler_name'
] as const
const replyColumns = [
  'replies.id',
  'replies.comment_id',
  'replies.author_id',
  'replies.text',
  'replies.created_at',
  'replies.updated_at',
  'author.name as author_name'
] as const

export const createCommentsRepo = (db: Db) => {
  const withPeople = (trx: Db) =>
    trx('comments')
      .join('users as author', 'author.id', 'comments.author_id')
      .leftJoin('users as settler', 'settler.id', 'comments.settled_by')

  const repliesTo = async (commentIds: string[], trx: Db): Promise<Map<string, StoredReply[]>> => {
    const rows = await trx('replies')
      .join('users as author', 'author.id', 'replies.author_id')
      .whereIn('replies.comment_id', commentIds)
      .orderBy(['replies.created_at', 'replies.id'])
      .select<JoinedReply[]>(...replyColumns)
    const byComment = new Map<string, StoredReply[]>()
    for (const row of rows) byComment.set(row.comment_id, [...(byComment.get(row.comment_id) ?? []), toReply(row)])
    return byComment
  }

  return {
    /** Two queries whatever the number of comments. */
    ofTake: async (takeId: string): Promise<StoredComment[]> => {
      const rows = await withPeople(db)
        .where('comments.take_id', takeId)
        .orderBy(['comments.start_sec', 'comments.created_at', 'comments.id'])
        .select<JoinedComment[]>(...commentColumns)
      const replies = await repliesTo(
        rows.map((row) => row.id),
        db
      )
      return rows.map((row) => toComment(row, replies.get(row.id) ?? []))
    },
    find: async (id: string, trx: Db = db): Promise<StoredComment | null> => {
      const row = await withPeople(trx)
        .where('comments.id', id)
        .first<JoinedComment | undefined>(...commentColumns)
      return row ? toComment(row, (await repliesTo([id], trx)).get(id) ?? []) : null
    },
    count: async (takeId: string, trx: Db): Promise<number> => {
      const [row] = await trx('comments').where({ take_id: takeId }).count<{ count: number }[]>('id as count')
      return row?.count ?? 0
    },
    insert: async (
      row: {
        id: string
        takeId: string
        authorId: string
        kind: CommentKind
        text: string
        startSec: number
        endSec: number
      },
      trx: Db
    ): Promise<void> => {
      await trx('comments').insert({
        id: row.id,
        take_id: row.takeId,
        author_id: row.authorId,
        kind: row.kind,
        text: row.text,
        start_sec: row.startSec,
        end_sec: row.endSec
      })
    },
    update: async (
      id: string,
      change: {
        kind?: CommentKind | undefined
        text?: string | undefined
        span?: { startSec: number; endSec: number } | undefined
      },
      trx: Db
    ): Promise<void> => {
      await trx('comments')
        .where({ id })
        .update({
          ...(change.kind ? { kind: change.kind } : {}),
          // A kind that is never open keeps no trace of having been settled.
          ...(change.kind && !opens(change.kind) ? { settled_at: null, settled_by: null } : {}),
          ...(change.text === undefined ? {} : { text: change.text }),
          ...(change.span ? { start_sec: change.span.startSec, end_sec: change.span.endSec } : {}),
          updated_at: trx.fn.now()
        })
    },
    settle: async (id: string, settledBy: string | null, trx: Db): Promise<void> => {
      await trx('comments')
        .where({ id })
        .update({ settled_by: settledBy, settled_at: settledBy ? trx.fn.now() : null })
    },
    /** True when it was there. */
    remove: async (id: string, trx: Db): Promise<boolean> => (await trx('comments').where({ id }).delete()) > 0,
    insertReply: async (
      row: { id: string; commentId: string; authorId: string; text: string },
      trx: Db
    ): Promise<void> => {
      await trx('replies').insert({ id: row.id, comment_id: row.commentId, author_id: row.authorId, text: row.text })
    },
    reply: (id: string, trx: Db = db) => trx('replies').where({ id }).first('id', 'comment_id', 'author_id'),
    updateReply: async (id: string, text: string, trx: Db): Promise<void> => {
      await trx('replies').where({ id }).update({ text, updated_at: trx.fn.now() })
    },
    removeReply: async (id: string, trx: Db): Promise<void> => {
      await trx('replies').where({ id }).delete()
    }
  }
}
export type CommentsRepo = ReturnType<typeof createCommentsRepo>
