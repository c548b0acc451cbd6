// Where unsent changes and half-written words wait in this browser: by member and take, so that nobody sends another's.
import type { ChangeStore } from '@client/features/comments/change-queue'
import type { PendingChange } from '@client/features/comments/changes'
import { outbox } from '@client/lib/outbox'

const place = (takeId: string): string => `comments of ${takeId}`

export const commentOutbox = (memberId: string, takeId: string): ChangeStore => ({
  list: async () => (await outbox.list<PendingChange>(memberId, place(takeId))).map(({ value }) => value),
  put: (change) => outbox.put(memberId, place(takeId), change.id, change),
  remove: (id) => outbox.remove(id)
})

const draftPlace = 'drafts of comments'
const draftId = (memberId: string, about: string): string => `draft ${memberId} ${about}`

/** `about` is a take (a new comment) or a comment (an answer). */
export const drafts = {
  read: async <T>(memberId: string, about: string): Promise<T | null> => {
    const kept = await outbox.list<T>(memberId, draftPlace)
    return kept.find(({ id }) => id === draftId(memberId, about))?.value ?? null
  },
  keep: <T>(memberId: string, about: string, draft: T): Promise<void> =>
    outbox.put(memberId, draftPlace, draftId(memberId, about), draft),
  drop: (memberId: string, about: string): Promise<void> => outbox.remove(draftId(memberId, about))
}
