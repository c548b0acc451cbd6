import { useEffect, useRef, useState } from 'react'
import type { CommentKind } from '@shared/contracts/comments'
import { limits } from '@shared/limits'
import type { PlaceWords } from '@shared/timing/place-words'
import type { Span } from '@shared/timing/types'
import { aboutWords } from './about-words'
import { KindChoice } from './kind-choice'
import { useDraft } from './use-draft'
import { WordsForm } from './words-form'

interface CommentDraft {
  text: string
  kind: CommentKind
  /** What it was begun about, when nothing was selected. */
  span: Span | null
}

export interface WriteBoxProps {
  memberId: string
  takeId: string
  selection: Span | null
  /** What the line is on: its bar, or the moment itself. */
  spanHere: () => Span
  /** Redraws when the line comes to another bar. */
  hereKey: number | null
  placeOf: (span: Span) => PlaceWords
  /** Rises each time the box is asked to take the focus. */
  focusCount: number
  onSay: (kind: CommentKind, text: string, span: Span) => void
}

const empty: CommentDraft = { text: '', kind: 'question', span: null }

/** A new comment: on the selection, or on the bar the line is in. Begun words stay with the bar they were begun on. */
export function WriteBox(props: WriteBoxProps) {
  const { selection, spanHere, placeOf, focusCount, onSay } = props
  const draft = useDraft(props.memberId, props.takeId, empty)
  const [pinned, setPinned] = useState<Span | null>(null)
  const box = useRef<HTMLDivElement>(null)
  const { text, kind, span } = draft.value
  const target = selection ?? span ?? pinned ?? spanHere()

  useEffect(() => {
    if (focusCount > 0) box.current?.querySelector('textarea')?.focus()
  }, [focusCount])

  return (
    <div
      ref={box}
      onBlur={(event) => {
        if (!event.currentTarget.contains(event.relatedTarget)) setPinned(null)
      }}
    >
      <WordsForm
        label={`Write about ${aboutWords(placeOf(target).place)}`}
        placeholder="What do you hear?"
        does="Say it"
        look="primary"
        text={text}
        rows={2}
        maxLength={limits.commentText}
        onFocus={() => setPinned(pinned ?? spanHere())}
        onText={(next) => draft.write({ text: next, kind, span: next.trim() ? (span ?? pinned ?? spanHere()) : null })}
        onDone={() => {
          onSay(kind, text.trim(), target)
          draft.drop()
        }}
      >
        <KindChoice value={kind} onChange={(next) => draft.write({ ...draft.value, kind: next })} />
      </WordsForm>
    </div>
  )
}
