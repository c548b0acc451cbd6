// What waits for a person, out of what the groups hold. Pure.
import type { Comment } from '@shared/contracts/comments'
import type { Take } from '@shared/contracts/takes'

/** What this browser knows of a person's listening. */
export interface Heard {
  /** Takes older than this are not news, ms since 1970. */
  sinceMs: number
  takeIds: readonly string[]
}

/** On a first visit a fortnight counts as new. */
export const firstVisitMs = 14 * 24 * 3600 * 1000

const newestFirst = (a: { createdAt: string }, b: { createdAt: string }): number =>
  Date.parse(b.createdAt) - Date.parse(a.createdAt)

/** Takes of others that came since, can be heard, and were not opened from here. */
export const takesToHear = (takes: readonly Take[], meId: string, heard: Heard): Take[] => {
  const opened = new Set(heard.takeIds)
  return takes
    .filter(({ id, uploader, state, createdAt }) => {
      const isNew = Date.parse(createdAt) > heard.sinceMs && !opened.has(id)
      return isNew && uploader.id !== meId && state === 'ready'
    })
    .sort(newestFirst)
}

/** My takes on which somebody left something open. */
export const takesWithQuestions = (takes: readonly Take[], meId: string): Take[] =>
  takes.filter(({ uploader, openCount }) => uploader.id === meId && openCount > 0).sort(newestFirst)

/** What others left open on them. What I asked myself waits for the others. */
export const commentsToAnswer = (comments: readonly Comment[], meId: string): Comment[] =>
  comments.filter(({ isOpen, author }) => isOpen && author.id !== meId).sort(newestFirst)
