import { opens, type Comment, type Reply } from '@shared/contracts/comments'

export const me = { id: '00000000-0000-4000-8000-00000000000a', name: 'Inés Baltar' }
export const mara = { id: '00000000-0000-4000-8000-00000000000b', name: 'Mara Kessling' }
export const takeId = '00000000-0000-4000-8000-0000000000ff'

let count = 0
const uuid = (): string => `00000000-0000-4000-8000-${String((count += 1)).padStart(12, '0')}`

export const buildReply = (over: Partial<Reply> = {}): Reply => ({
  id: uuid(),
  commentId: uuid(),
  author: mara,
  text: 'Meant it.',
  createdAt: '2026-11-30T11:00:00.000Z',
  updatedAt: '2026-11-30T11:00:00.000Z',
  abilities: [],
  ...over
})

export const buildComment = (over: Partial<Comment> = {}): Comment => {
  const kind = over.kind ?? 'question'
  return {
    id: uuid(),
    takeId,
    author: mara,
    kind,
    text: 'Is this a G7?',
    startSec: 2,
    endSec: 4,
    isOpen: opens(kind),
    settledBy: null,
    settledAt: null,
    createdAt: '2026-11-30T10:00:00.000Z',
    updatedAt: '2026-11-30T10:00:00.000Z',
    replies: [],
    abilities: ['comment:reply'],
    ...over
  }
}
