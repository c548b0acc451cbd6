import { limits } from '@shared/limits'
import { useDraft } from './use-draft'
import { WordsForm } from './words-form'

export interface ReplyFormProps {
  memberId: string
  commentId: string
  onReply: (text: string) => void
  onCancel: () => void
}

const empty = { text: '' }

export function ReplyForm({ memberId, commentId, onReply, onCancel }: ReplyFormProps) {
  const draft = useDraft(memberId, commentId, empty)
  return (
    <WordsForm
      label="Your answer"
      labelHidden
      placeholder="Your answer"
      does="Answer"
      isFocused
      text={draft.value.text}
      maxLength={limits.replyText}
      onText={(text) => draft.write({ text })}
      onCancel={onCancel}
      onDone={() => {
        onReply(draft.value.text.trim())
        draft.drop()
      }}
    />
  )
}
