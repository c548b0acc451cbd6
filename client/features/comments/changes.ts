// What a person does to the comments of a take, and how it looks before the server has answered. Pure.
import { type Comment, type CommentKind, opens, type Reply } from '@shared/contracts/comments'
import type { Span } from '@shared/timing/types'

export type CommentChange =
  | { kind: 'create'; commentId: string; commentKind: CommentKind; text: string; span: Span }
  | { kind: 'update'; commentId: string; commentKind?: CommentKind; text?: string; span?: Span }
  | { kind: 'settle'; commentId: string; isOpen: boolean }
  | { kind: 'remove'; commentId: string }
  | { kind: 'reply'; commentId: string; replyId: string; text: string }
  | { kind: 'updateReply'; commentId: string; replyId: string; text: string }
  | { kind: 'removeReply'; commentId: string; replyId: string }

export interface PendingChange {
  /** The same change sent twice is harmless: creates carry their own ids, the rest says how things shall be. */
  id: string
  change: CommentChange
  /** When it was done, ISO-8601. */
  at: string
  /** Not sent before this (ms since 1970): a deletion waits while it can still be taken back. */
  notBeforeMs?: number
  /** Why the server did not take it; it waits for the person then. */
  refused?: string
}

export interface Sending {
  changeId: string
  refused: string | null
}
/** `sending` is set while something about it has not reached the server. */
export type ShownReply = Reply & { sending?: Sending }
export type ShownComment = Omit<Comment, 'replies'> & { replies: ShownReply[]; sending?: Sending }

interface Author {
  id: string
  name: string
}

/** The comments as the person left them, in the order of their place. */
export const withChanges = (
  comments: readonly Comment[],
  pending: readonly PendingChange[],
  me: Author,
  takeId: string
): ShownComment[] => {
  const shown = new Map<string, ShownComment>(comments.map((comment) => [comment.id, comment]))
  for (const each of pending) applyOne(shown, each, me, takeId)
  return [...shown.values()].sort(byPlace)
}

export const byPlace = (a: Comment | ShownComment, b: Comment | ShownComment): number =>
  a.startSec - b.startSec || a.endSec - b.endSec || Date.parse(a.createdAt) - Date.parse(b.createdAt)

const ownAbilities = (kind: CommentKind): string[] => [
  'comment:edit',
  'comment:delete',
  'comment:reply',
  ...(opens(kind) ? ['comment:settle'] : [])
]

const applyOne = (
  shown: Map<string, ShownComment>,
  { id, change, at, refused }: PendingChange,
  me: Author,
  takeId: string
): void => {
  const sending: Sending = { changeId: id, refused: refused ?? null }
  const before = shown.get(change.commentId)
  if (change.kind === 'create') {
    // Once the server lists it, its word counts.
    if (!before) shown.set(change.commentId, created(change, { at, sending, me, takeId }))
    return
  }
  if (!before) return
  if (change.kind === 'remove') {
    if (!refused) shown.delete(change.commentId)
    return
  }
  shown.set(change.commentId, changed(before, change, { at, sending, me }))
}

interface Done {
  at: string
  sending: Sending
  me: Author
}

const created = (
  { commentId, commentKind, text, span }: Extract<CommentChange, { kind: 'create' }>,
  { at, sending, me, takeId }: Done & { takeId: string }
): ShownComment => ({
  id: commentId,
  takeId,
  author: me,
  kind: commentKind,
  text,
  startSec: span.startSec,
  endSec: span.endSec,
  isOpen: opens(commentKind),
  settledBy: null,
  settledAt: null,
  createdAt: at,
  updatedAt: at,
  replies: [],
  abilities: ownAbilities(commentKind),
  sending
})

const changed = (
  before: ShownComment,
  change: Exclude<CommentChange, { kind: 'create' | 'remove' }>,
  { at, sending, me }: Done
): ShownComment => {
  switch (change.kind) {
    case 'update': {
      const kind = change.commentKind ?? before.kind
      const isKindNew = opens(kind) !== opens(before.kind)
      return {
        ...before,
        sending,
        kind,
        text: change.text ?? before.text,
        startSec: change.span?.startSec ?? before.startSec,
        endSec: change.span?.endSec ?? before.endSec,
        isOpen: isKindNew ? opens(kind) : before.isOpen
      }
    }
    case 'settle':
      return {
        ...before,
        sending,
        isOpen: change.isOpen,
        settledBy: change.isOpen ? null : me,
        settledAt: change.isOpen ? null : at
      }
    case 'reply': {
      if (before.replies.some(({ id }) => id === change.replyId)) return before
      const reply: ShownReply = {
        id: change.replyId,
        commentId: before.id,
        author: me,
        text: change.text,
        createdAt: at,
        updatedAt: at,
        abilities: ['reply:edit', 'reply:delete'],
        sending
      }
      return { ...before, replies: [...before.replies, reply] }
    }
    case 'updateReply':
      return {
        ...before,
        replies: before.replies.map((reply) =>
          reply.id === change.replyId ? { ...reply, text: change.text, sending } : reply
        )
      }
    case 'removeReply':
      return sending.refused ? before : { ...before, replies: before.replies.filter(({ id }) => id !== change.replyId) }
  }
}
