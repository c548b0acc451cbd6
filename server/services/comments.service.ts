import { abilitiesOn, type Permission } from '@shared/access/permissions'
import type { Relation } from '@shared/access/relations'
import { type Comment, type CommentKind, opens, type Reply } from '@shared/contracts/comments'
import type { GroupEventType } from '@shared/contracts/group-events'
import { problem } from '@shared/errors/problems'
import { limits } from '@shared/limits'
import type { Db } from '@server/db/knex'
import type { Actor } from '@server/http/handlers'
import type { CommentsRepo, StoredComment, StoredReply } from '@server/repositories/comments.repo'
import type { EventsRepo } from '@server/repositories/events.repo'
import type { TakesRepo } from '@server/repositories/takes.repo'
import { stillAllowed } from '@server/services/still-allowed'

interface Deps {
  db: Db
  comments: CommentsRepo
  takes: Pick<TakesRepo, 'home'>
  events: EventsRepo
}
type Held = ReadonlySet<Relation>
interface Span {
  startSec: number
  endSec: number
}

/** Relations to the take around it, with 'author' decided for this very comment or reply. */
const forAuthor = (held: Held, isOwn: boolean): Held => {
  const own = new Set(held)
  if (isOwn) own.add('author')
  else own.delete('author')
  return own
}

const withAbilities = (comment: StoredComment, actor: Actor, held: Held): Comment => {
  const replyOf = (reply: StoredReply): Reply => ({
    ...reply,
    abilities: abilitiesOn('reply', forAuthor(held, reply.author.id === actor.id))
  })
  const abilities = abilitiesOn('comment', forAuthor(held, comment.author.id === actor.id)).filter(
    (ability) => ability !== 'comment:settle' || opens(comment.kind)
  )
  return { ...comment, abilities, replies: comment.replies.map(replyOf) }
}

export const createCommentService = ({ db, comments, takes, events }: Deps) => {
  /** One change of one comment: rights checked again with the group locked, the group told. */
  const change = async (
    actor: Actor,
    held: Held,
    permission: Permission,
    id: { commentId: string; replyId?: string },
    work: (comment: StoredComment, trx: Db) => Promise<void>
  ): Promise<Comment> =>
    db.transaction(async (trx) => {
      const { takeId } = await found(id.commentId, trx)
      await tell('comment:updated', takeId, id.commentId, actor, trx, (groupId) =>
        stillAllowed(actor, permission, id, groupId, trx)
      )
      await work(await found(id.commentId, trx), trx)
      const after = await comments.find(id.commentId, trx)
      if (!after) throw problem('not-found')
      return withAbilities(after, actor, held)
    })

  const found = async (commentId: string, trx: Db): Promise<StoredComment> => {
    const comment = await comments.find(commentId, trx)
    if (!comment) throw problem('not-found')
    return comment
  }

  /** The group around a take, locked and checked: first of all in a transaction, before any row is touched. */
  const lockAround = async (takeId: string, trx: Db, check: (groupId: string) => Promise<void>): Promise<string> => {
    const home = await takes.home(takeId, trx)
    if (!home) throw problem('not-found')
    await check(home.groupId)
    return home.groupId
  }
  const tell = async (
    type: GroupEventType,
    takeId: string,
    objectId: string,
    actor: Actor,
    trx: Db,
    check: (groupId: string) => Promise<void>
  ): Promise<void> => {
    const groupId = await lockAround(takeId, trx, check)
    await events.add({ groupId, type, objectId, takeId, actorId: actor.id }, trx)
  }

  const within = async (takeId: string, span: Span, trx: Db): Promise<void> => {
    const home = await takes.home(takeId, trx)
    const end = home?.durationSec
    if (end && span.startSec > end) {
      throw problem('invalid', { errors: [{ in: 'body', path: 'startSec', message: 'The take is over before that.' }] })
    }
  }

  return {
    list: async (actor: Actor, held: Held, takeId: string): Promise<{ items: Comment[] }> => ({
      items: (await comments.ofTake(takeId)).map((comment) => withAbilities(comment, actor, held))
    }),

    create: async (
      actor: Actor,
      held: Held,
      takeId: string,
      input: { id: string; kind: CommentKind; text: string } & Span
    ): Promise<Comment> =>
      db.transaction(async (trx) => {
        const groupId = await lockAround(takeId, trx, (group) =>
          stillAllowed(actor, 'take:comment', { takeId }, group, trx)
        )
        const before = await comments.find(input.id, trx)
        if (before) {
          // Sent again after a lost answer.
          if (before.takeId !== takeId || before.author.id !== actor.id) throw problem('already-there')
          return withAbilities(before, actor, held)
        }
        await within(takeId, input, trx)
        await events.add({ groupId, type: 'comment:created', objectId: input.id, takeId, actorId: actor.id }, trx)
        if ((await comments.count(takeId, trx)) >= limits.commentsPerTake) throw problem('over-quota')
        await comments.insert({ ...input, takeId, authorId: actor.id }, trx)
        const after = await comments.find(input.id, trx)
        if (!after) throw problem('internal')
        return withAbilities(after, actor, held)
      }),

    update: (
      actor: Actor,
      held: Held,
      commentId: string,
      input: { kind?: CommentKind | undefined; text?: string | undefined; span?: Span | undefined }
    ): Promise<Comment> =>
      change(actor, held, 'comment:edit', { commentId }, async (before, trx) => {
        if (input.span) await within(before.takeId, input.span, trx)
        await comments.update(commentId, input, trx)
      }),

    settle: (actor: Actor, held: Held, commentId: string, isOpen: boolean): Promise<Comment> =>
      change(actor, held, 'comment:settle', { commentId }, async (before, trx) => {
        if (!opens(before.kind))
          throw problem('invalid', { detail: 'Only a question or a thing to fix can be settled.' })
        if (before.isOpen !== isOpen) await comments.settle(commentId, isOpen ? null : actor.id, trx)
      }),

    remove: (actor: Actor, commentId: string): Promise<void> =>
      db.transaction(async (trx) => {
        const { takeId } = await found(commentId, trx)
        await tell('comment:removed', takeId, commentId, actor, trx, (groupId) =>
          stillAllowed(actor, 'comment:delete', { commentId }, groupId, trx)
        )
        if (!(await comments.remove(commentId, trx))) throw problem('not-found')
      }),

    reply: (actor: Actor, held: Held, commentId: string, input: { id: string; text: string }): Promise<Comment> =>
      change(actor, held, 'comment:reply', { commentId }, async (_, trx) => {
        const before = await comments.reply(input.id, trx)
        if (before) {
          if (before.comment_id !== commentId || before.author_id !== actor.id) throw problem('already-there')
          return
        }
        await comments.insertReply({ ...input, commentId, authorId: actor.id }, trx)
      }),

    updateReply: async (actor: Actor, held: Held, replyId: string, text: string): Promise<Comment> => {
      const reply = await comments.reply(replyId)
      if (!reply) throw problem('not-found')
      return change(actor, held, 'reply:edit', { commentId: reply.comment_id, replyId }, (_, trx) =>
        comments.updateReply(replyId, text, trx)
      )
    },

    removeReply: async (actor: Actor, held: Held, replyId: string): Promise<Comment> => {
      const reply = await comments.reply(replyId)
      if (!reply) throw problem('not-found')
      return change(actor, held, 'reply:delete', { commentId: reply.comment_id, replyId }, (_, trx) =>
        comments.removeReply(replyId, trx)
      )
    }
  }
}
export type CommentService = ReturnType<typeof createCommentService>
