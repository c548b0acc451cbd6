import { describe, expect, it } from 'vitest'
import { withChanges, type CommentChange, type PendingChange } from '@client/features/comments/changes'
import { lettersOf } from '@client/features/comments/letters'
import { shortNames } from '@client/features/comments/short-names'
import { buildComment, me, mara } from './build-comment'

const pend = (...changes: CommentChange[]): PendingChange[] =>
  changes.map((change, index) => ({ id: `p${index}`, change, at: '2026-12-01T12:00:00.000Z' }))
const shown = (comments: ReturnType<typeof buildComment>[], ...changes: CommentChange[]) =>
  withChanges(comments, pend(...changes), me, 'take')

const create: CommentChange = {
  kind: 'create',
  commentId: 'new',
  commentKind: 'to fix',
  text: 'Late.',
  span: { startSec: 5, endSec: 6 }
}

describe('withChanges', () => {
  it('shows a new comment at once in its place, as sending, by its author', () => {
    const [first, second] = shown([buildComment({ id: 'a', startSec: 9 })], create)
    expect(first).toMatchObject({ id: 'new', author: me, isOpen: true, sending: { changeId: 'p0', refused: null } })
    expect(second?.id).toBe('a')
  })

  it('shows it once when the server lists it already', () => {
    const comments = shown([buildComment({ id: 'new', text: 'Late.' })], create)
    expect(comments.map(({ id, sending }) => [id, sending])).toEqual([['new', undefined]])
  })

  it('lays later changes over earlier ones that have not been sent either', () => {
    const [comment] = shown(
      [],
      create,
      { kind: 'update', commentId: 'new', text: 'Late again.' },
      { kind: 'reply', commentId: 'new', replyId: 'r', text: 'So it is.' },
      { kind: 'updateReply', commentId: 'new', replyId: 'r', text: 'It is.' },
      { kind: 'settle', commentId: 'new', isOpen: false }
    )
    expect(comment).toMatchObject({ text: 'Late again.', isOpen: false, settledBy: me })
    expect(comment?.replies.map(({ text }) => text)).toEqual(['It is.'])
  })

  it('opens or closes a comment whose kind can no longer, or can now, be open', () => {
    const isOpenAfter = (comment: ReturnType<typeof buildComment>, commentKind: 'good' | 'to fix') =>
      shown([comment], { kind: 'update', commentId: comment.id, commentKind })[0]?.isOpen
    const question = buildComment({ kind: 'question', isOpen: true })
    expect(isOpenAfter(question, 'good')).toBe(false)
    expect(isOpenAfter({ ...question, isOpen: false }, 'to fix')).toBe(false)
    expect(isOpenAfter(buildComment({ kind: 'good', isOpen: false }), 'to fix')).toBe(true)
  })

  it('takes a deleted one out of sight, and shows it again when the server refused', () => {
    const remove: CommentChange = { kind: 'remove', commentId: 'a' }
    const comments = [buildComment({ id: 'a' })]
    expect(shown(comments, remove)).toEqual([])
    const refused = withChanges(comments, [{ ...(pend(remove)[0] as PendingChange), refused: 'no' }], me, 'take')
    expect(refused).toHaveLength(1)
  })
})

describe('lettersOf', () => {
  it('gives letters in the order things were said, going on after z', () => {
    const comments = Array.from({ length: 30 }, (_, n) => ({
      id: `c${n}`,
      createdAt: new Date(Date.UTC(2026, 0, 30 - n)).toISOString()
    }))
    const letters = lettersOf(comments)
    expect([letters.get('c29'), letters.get('c28'), letters.get('c4'), letters.get('c3'), letters.get('c0')]).toEqual([
      'a',
      'b',
      'z',
      'aa',
      'ad'
    ])
  })
})

describe('shortNames', () => {
  it('keeps whole names where two people share a first one', () => {
    const names = shortNames([mara, { id: 'm2', name: 'Mara Lindt' }, { id: 'i', name: 'Inés Baltar' }, mara])
    expect([...names.values()]).toEqual(['Mara Kessling', 'Mara Lindt', 'Inés'])
  })
})
