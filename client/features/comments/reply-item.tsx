import { useState } from 'react'
import { limits } from '@shared/limits'
import type { CommentActs } from './api'
import type { ShownReply } from './changes'
import { Refused } from './refused'
import { SaidBy } from './said-by'
import { SmallButton } from './small-button'
import { WordsForm } from './words-form'

export interface ReplyItemProps {
  reply: ShownReply
  acts: CommentActs
  called: string
  onRemove: (replyId: string) => void
}

export function ReplyItem({ reply, acts, called, onRemove }: ReplyItemProps) {
  const [text, setText] = useState<string | null>(null)
  if (text !== null)
    return (
      <li className="border-l border-rule pl-3">
        <WordsForm
          label="Your answer"
          labelHidden
          does="Keep it"
          isFocused
          text={text}
          maxLength={limits.replyText}
          onText={setText}
          onCancel={() => setText(null)}
          onDone={() => {
            acts.editReply(reply.commentId, reply.id, text.trim())
            setText(null)
          }}
        />
      </li>
    )
  return (
    <li className="border-l border-rule pl-3">
      <p className="break-words whitespace-pre-wrap">{reply.text}</p>
      <SaidBy author={reply.author} called={called} at={reply.createdAt} sending={reply.sending}>
        {reply.abilities.includes('reply:edit') ? (
          <SmallButton onClick={() => setText(reply.text)} aria-label="Edit answer">
            Edit
          </SmallButton>
        ) : null}
        {reply.abilities.includes('reply:delete') ? (
          <SmallButton onClick={() => onRemove(reply.id)} aria-label="Delete answer">
            Delete
          </SmallButton>
        ) : null}
      </SaidBy>
      <Refused sending={reply.sending} acts={acts} />
    </li>
  )
}
