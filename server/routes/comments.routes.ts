import type { commentRoutes } from '@shared/contracts/comments'
import type { Handlers } from '@server/http/handlers'
import type { CommentService } from '@server/services/comments.service'

export const commentHandlers = (comments: CommentService): Handlers<typeof commentRoutes> => ({
  list: ({ actor, relations, params }) => comments.list(actor, relations, params.takeId),
  create: ({ actor, relations, params, body }) => comments.create(actor, relations, params.takeId, body),
  update: ({ actor, relations, params, body }) => comments.update(actor, relations, params.commentId, body),
  remove: async ({ actor, params }) => {
    await comments.remove(actor, params.commentId)
    return {}
  },
  settle: ({ actor, relations, params, body }) => comments.settle(actor, relations, params.commentId, body.isOpen),
  reply: ({ actor, relations, params, body }) => comments.reply(actor, relations, params.commentId, body),
  updateReply: ({ actor, relations, params, body }) =>
    comments.updateReply(actor, relations, params.replyId, body.text),
  removeReply: ({ actor, relations, params }) => comments.removeReply(actor, relations, params.replyId)
})
