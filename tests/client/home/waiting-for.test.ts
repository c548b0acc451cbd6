import { describe, expect, it } from 'vitest'
import type { Comment } from '@shared/contracts/comments'
import type { Take } from '@shared/contracts/takes'
import { commentsToAnswer, takesToHear, takesWithQuestions } from '@client/features/home/waiting-for'

const day = (n: number) => `2026-03-${String(n).padStart(2, '0')}T12:00:00Z`
const take = (id: string, over: Partial<Take> = {}): Take =>
  ({ id, uploader: { id: 'ines', name: 'Inés' }, state: 'ready', createdAt: day(10), openCount: 0, ...over }) as Take
const comment = (id: string, over: Partial<Comment> = {}): Comment =>
  ({ id, author: { id: 'mara', name: 'Mara' }, isOpen: true, createdAt: day(10), ...over }) as Comment
const ids = (items: { id: string }[]) => items.map(({ id }) => id)

describe('takesToHear', () => {
  const heard = { sinceMs: Date.parse(day(5)), takeIds: ['opened'] }
  it('lists what others have added since and can be heard, newest first', () => {
    const takes = [
      take('old', { createdAt: day(4) }),
      take('new', { createdAt: day(6) }),
      take('newer', { createdAt: day(9) }),
      take('opened'),
      take('mine', { uploader: { id: 'me', name: 'Me' } }),
      take('being read', { state: 'working' })
    ]
    expect(ids(takesToHear(takes, 'me', heard))).toEqual(['newer', 'new'])
  })
})

describe('what is to be answered', () => {
  it('is what others left open on my takes', () => {
    const mine = { uploader: { id: 'me', name: 'Me' } }
    expect(
      ids(
        takesWithQuestions([take('a', { ...mine, openCount: 2 }), take('b', mine), take('c', { openCount: 1 })], 'me')
      )
    ).toEqual(['a'])
    const comments = [
      comment('asked', { createdAt: day(8) }),
      comment('later', { createdAt: day(9) }),
      comment('settled', { isOpen: false }),
      comment('my own', { author: { id: 'me', name: 'Me' } })
    ]
    expect(ids(commentsToAnswer(comments, 'me'))).toEqual(['later', 'asked'])
  })
})
