// Tells, politely, what others wrote while one is at the desk. How often it may be told is for the log to hold to.
import { useEffect, useRef } from 'react'
import { aboutWords } from '@client/features/comments/about-words'
import type { ShownComment } from '@client/features/comments/changes'
import type { Span } from '@shared/timing/types'

interface News {
  comments: readonly ShownComment[]
  isLoading: boolean
  memberId: string
  placeOf: (span: Span) => string
  say: (message: string) => void
}

const spanOf = ({ startSec, endSec }: ShownComment): Span => ({ startSec, endSec })

export const useCommentNews = ({ comments, isLoading, memberId, placeOf, say }: News): void => {
  const known = useRef<Set<string> | null>(null)
  useEffect(() => {
    if (isLoading) return
    const before = known.current
    known.current = new Set(comments.flatMap(({ id, replies }) => [id, ...replies.map((reply) => reply.id)]))
    if (!before) return
    for (const comment of comments) {
      const { id, author, kind, replies } = comment
      const place = aboutWords(placeOf(spanOf(comment)))
      if (!before.has(id) && author.id !== memberId) say(`${author.name} wrote about ${place}: ${kind}.`)
      for (const reply of replies)
        if (!before.has(reply.id) && reply.author.id !== memberId) say(`${reply.author.name} answered about ${place}.`)
    }
  }, [comments, isLoading, memberId, placeOf, say])
}
