import { CommentKind } from '@shared/contracts/comments'
import { SentenceChoice } from '@client/ui/sentence'

const choices = CommentKind.options.map((value) => ({ value, label: value }))

/** What kind of thing is said. */
export const KindChoice = ({ value, onChange }: { value: CommentKind; onChange: (kind: CommentKind) => void }) => (
  <span className="text-sm text-pencil">
    as <SentenceChoice label="Kind of comment" value={value} choices={choices} onChange={onChange} />
  </span>
)
