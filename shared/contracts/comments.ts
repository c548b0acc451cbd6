import { z } from 'zod'
import { Instant, paragraph, Person, Seconds, Uuid } from '@shared/contracts/common'
import { defineRoute } from '@shared/contracts/route'
import { limits } from '@shared/limits'

export const CommentKind = z.enum(['question', 'observation', 'to fix', 'good'])
export type CommentKind = z.infer<typeof CommentKind>
/** Only these can be open; the others are said and done. */
export const opens = (kind: CommentKind): boolean => kind === 'question' || kind === 'to fix'

export const Reply = z.object({
  id: Uuid,
  commentId: Uuid,
  author: Person,
  text: z.string(),
  createdAt: Instant,
  updatedAt: Instant,
  abilities: z.array(z.string())
})
export type Reply = z.infer<typeof Reply>

export const Comment = z.object({
  id: Uuid,
  takeId: Uuid,
  author: Person,
  kind: CommentKind,
  text: z.string(),
  startSec: z.number(),
  endSec: z.number(),
  isOpen: z.boolean(),
  settledBy: Person.nullable(),
  settledAt: Instant.nullable(),
  createdAt: Instant,
  updatedAt: Instant,
  replies: z.array(Reply),
  abilities: z.array(z.string())
})
export type Comment = z.infer<typeof Comment>

const TakeParams = z.object({ takeId: Uuid })
const CommentParams = z.object({ commentId: Uuid })
const ReplyParams = z.object({ replyId: Uuid })

export const CreateComment = z
  .object({ id: Uuid, kind: CommentKind, text: paragraph(limits.commentText), startSec: Seconds, endSec: Seconds })
  .refine((c) => c.endSec >= c.startSec, { path: ['endSec'], message: 'The end comes before the start.' })

export const commentRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/takes/:takeId/comments',
    access: 'take:read',
    summary: 'Comments of a take with their replies, in the order of their place',
    params: TakeParams,
    response: z.object({ items: z.array(Comment) })
  }),
  create: defineRoute({
    method: 'POST',
    path: '/api/takes/:takeId/comments',
    access: 'take:comment',
    summary: 'Say something about a span of a take',
    params: TakeParams,
    body: CreateComment,
    status: 201,
    response: Comment
  }),
  update: defineRoute({
    method: 'PATCH',
    path: '/api/comments/:commentId',
    access: 'comment:edit',
    summary: 'Change the words, kind or span of a comment',
    params: CommentParams,
    body: z.object({
      kind: CommentKind.optional(),
      text: paragraph(limits.commentText).optional(),
      span: z
        .object({ startSec: Seconds, endSec: Seconds })
        .refine((s) => s.endSec >= s.startSec, { path: ['endSec'], message: 'The end comes before the start.' })
        .optional()
    }),
    response: Comment
  }),
  remove: defineRoute({
    method: 'DELETE',
    path: '/api/comments/:commentId',
    access: 'comment:delete',
    summary: 'Delete a comment',
    params: CommentParams
  }),
  settle: defineRoute({
    method: 'POST',
    path: '/api/comments/:commentId/settle',
    access: 'comment:settle',
    summary: 'Settle a question or a thing to fix, or open it again',
    params: CommentParams,
    body: z.object({ isOpen: z.boolean() }),
    response: Comment
  }),
  reply: defineRoute({
    method: 'POST',
    path: '/api/comments/:commentId/replies',
    access: 'comment:reply',
    summary: 'Answer a comment',
    params: CommentParams,
    body: z.object({ id: Uuid, text: paragraph(limits.replyText) }),
    status: 201,
    response: Comment
  }),
  updateReply: defineRoute({
    method: 'PATCH',
    path: '/api/replies/:replyId',
    access: 'reply:edit',
    summary: 'Change an answer',
    params: ReplyParams,
    body: z.object({ text: paragraph(limits.replyText) }),
    response: Comment
  }),
  removeReply: defineRoute({
    method: 'DELETE',
    path: '/api/replies/:replyId',
    access: 'reply:delete',
    summary: 'Delete an answer',
    params: ReplyParams,
    response: Comment
  })
}
