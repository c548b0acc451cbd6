// The comments of a take as this person sees them: the server's, with their own unsent changes on top.
import { useEffect, useMemo, useSyncExternalStore } from 'react'
import { type QueryClient, useQueryClient } from '@tanstack/react-query'
import { type Comment, type CommentKind, commentRoutes } from '@shared/contracts/comments'
import type { Span } from '@shared/timing/types'
import { createChangeQueue, type ChangeQueue } from '@client/features/comments/change-queue'
import { type CommentChange, type ShownComment, withChanges } from '@client/features/comments/changes'
import { commentOutbox } from '@client/features/comments/outbox'
import { type ApiProblem, callRoute } from '@client/lib/api'
import { freshId } from '@client/lib/ids'
import { routeKey, useRouteQuery } from '@client/lib/query'

/** A deletion can be taken back for as long as its notice stands, ms. */
export const takeBackMs = 10_000

interface Me {
  id: string
  name: string
}

/** Sends one change; the comment as it is afterwards, or null when it is gone. */
const sendChange = async (takeId: string, change: CommentChange): Promise<Comment | null> => {
  const params = { commentId: change.commentId }
  switch (change.kind) {
    case 'create':
      return callRoute(commentRoutes.create, {
        params: { takeId },
        body: { id: change.commentId, kind: change.commentKind, text: change.text, ...change.span }
      })
    case 'update':
      return callRoute(commentRoutes.update, {
        params,
        body: { kind: change.commentKind, text: change.text, span: change.span }
      })
    case 'settle':
      return callRoute(commentRoutes.settle, { params, body: { isOpen: change.isOpen } })
    case 'remove':
      await callRoute(commentRoutes.remove, { params })
      return null
    case 'reply':
      return callRoute(commentRoutes.reply, { params, body: { id: change.replyId, text: change.text } })
    case 'updateReply':
      return callRoute(commentRoutes.updateReply, { params: { replyId: change.replyId }, body: { text: change.text } })
    case 'removeReply':
      return callRoute(commentRoutes.removeReply, { params: { replyId: change.replyId } })
  }
}

const listKey = (takeId: string) => routeKey(commentRoutes.list, { params: { takeId } })

/** Puts the answer where the list is, so that nothing flickers between the answer and the next listing. */
const takeIn = async (
  client: QueryClient,
  takeId: string,
  commentId: string,
  comment: Comment | null
): Promise<void> => {
  await client.cancelQueries({ queryKey: listKey(takeId) })
  client.setQueryData<{ items: Comment[] }>(listKey(takeId), (list) => {
    const others = (list?.items ?? []).filter(({ id }) => id !== commentId)
    return list && { items: comment ? [...others, comment] : others }
  })
  void client.invalidateQueries({ queryKey: listKey(takeId) })
}

const wait = (ms: number): Promise<void> => new Promise((done) => setTimeout(done, ms))

// Queues outlive the desk they were filled at: what is on its way goes on when one looks at another take.
const queues = new Map<string, { client: QueryClient; queue: ChangeQueue }>()

const queueFor = (client: QueryClient, memberId: string, takeId: string): ChangeQueue => {
  const key = `${memberId} ${takeId}`
  const known = queues.get(key)
  if (known?.client === client) return known.queue
  const queue = createChangeQueue({
    store: commentOutbox(memberId, takeId),
    send: async ({ change }) => takeIn(client, takeId, change.commentId, await sendChange(takeId, change)),
    now: () => Date.now(),
    wait
  })
  queues.set(key, { client, queue })
  return queue
}

/** What can be done to the comments of a take; the same object as long as take and person are. */
export interface CommentActs {
  /** The new comment's id. */
  say(kind: CommentKind, text: string, span: Span): string
  edit(commentId: string, to: { kind?: CommentKind; text?: string }): void
  move(commentId: string, span: Span): void
  settle(commentId: string, isOpen: boolean): void
  reply(commentId: string, text: string): void
  editReply(commentId: string, replyId: string, text: string): void
  /** Gone from sight at once; the function given back brings it back while `takeBackMs` have not passed. */
  remove(commentId: string): () => boolean
  removeReply(commentId: string, replyId: string): () => boolean
  tryAgain(changeId: string): void
  takeBack(changeId: string): void
}

export interface TakeComments {
  takeId: string
  me: Me
  /** In the order of their place. */
  comments: readonly ShownComment[]
  isLoading: boolean
  fault: ApiProblem | null
  refetch: () => void
  acts: CommentActs
}

export const useTakeComments = (takeId: string, me: Me): TakeComments => {
  const client = useQueryClient()
  const list = useRouteQuery(commentRoutes.list, { params: { takeId } })
  const queue = useMemo(() => queueFor(client, me.id, takeId), [client, me.id, takeId])
  const pending = useSyncExternalStore(queue.subscribe, queue.pending)
  useEffect(() => void queue.wake(), [queue])
  const { id: myId, name } = me
  const comments = useMemo(
    () => withChanges(list.data?.items ?? [], pending, { id: myId, name }, takeId),
    [list.data, pending, myId, name, takeId]
  )
  const acts = useMemo<CommentActs>(() => {
    const push = (change: CommentChange, notBeforeMs?: number): string => {
      const id = freshId()
      queue.push({ id, change, at: new Date().toISOString(), ...(notBeforeMs ? { notBeforeMs } : {}) })
      return id
    }
    const pushLater = (change: CommentChange): (() => boolean) => {
      const id = push(change, Date.now() + takeBackMs)
      return () => queue.takeBack(id)
    }
    return {
      say: (commentKind, text, span) => {
        const commentId = freshId()
        push({ kind: 'create', commentId, commentKind, text, span })
        return commentId
      },
      edit: (commentId, to) => void push({ kind: 'update', commentId, commentKind: to.kind, text: to.text }),
      move: (commentId, span) => void push({ kind: 'update', commentId, span }),
      settle: (commentId, isOpen) => void push({ kind: 'settle', commentId, isOpen }),
      reply: (commentId, text) => void push({ kind: 'reply', commentId, replyId: freshId(), text }),
      editReply: (commentId, replyId, text) => void push({ kind: 'updateReply', commentId, replyId, text }),
      remove: (commentId) => pushLater({ kind: 'remove', commentId }),
      removeReply: (commentId, replyId) => pushLater({ kind: 'removeReply', commentId, replyId }),
      tryAgain: queue.tryAgain,
      takeBack: (changeId) => void queue.takeBack(changeId)
    }
  }, [queue])
  const { refetch } = list
  return useMemo(
    () => ({
      takeId,
      me: { id: myId, name },
      comments,
      isLoading: list.isPending,
      fault: list.error,
      refetch: () => void refetch(),
      acts
    }),
    [takeId, myId, name, comments, list.isPending, list.error, refetch, acts]
  )
}
