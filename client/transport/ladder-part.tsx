import { useId, useState, type CSSProperties, type KeyboardEvent } from 'react'
import { ladderWords, type SpeedLadder } from '@shared/practice/ladder'
import { readLadder } from '@shared/practice/read-ladder'
import { FieldFaultText } from '@client/ui/field'
import { Part } from './part'
import type { LoopMannerControls } from './use-loop-manner'

export interface LadderPartProps {
  manner: LoopMannerControls
  /** The speed is everybody's in a session: there the loop keeps one. */
  isShared: boolean
}

/** The loop that gets faster: on or off, and how, as one sentence. */
export function LadderPart({ manner, isShared }: LadderPartProps) {
  return (
    <Part label={isShared ? 'Faster, when you practise alone' : 'Faster'}>
      <label className="flex min-h-7 min-w-6 items-center self-start">
        <span className="sr-only">The loop gets faster</span>
        <input
          type="checkbox"
          className="plumb-mark"
          checked={manner.isLadderOn && !isShared}
          disabled={isShared}
          onChange={(event) => manner.set({ isLadderOn: event.target.checked })}
        />
      </label>
      <LadderSentence ladder={manner.ladder} disabled={isShared} onLadder={(ladder) => manner.set({ ladder })} />
    </Part>
  )
}

interface LadderSentenceProps {
  ladder: SpeedLadder
  disabled: boolean
  onLadder: (ladder: SpeedLadder) => void
}

/** Enter or leaving keeps what is written, Esc what was there before; what cannot be read is said below. */
export function LadderSentence({ ladder, disabled, onLadder }: LadderSentenceProps) {
  const id = useId()
  const [draft, setDraft] = useState<string | null>(null)
  const [fault, setFault] = useState<string | null>(null)
  const words = ladderWords(ladder)
  const shown = draft ?? words

  const write = (text: string | null): void => {
    setDraft(text)
    setFault(null)
  }
  const keep = (): void => {
    if (draft === null) return
    const read = readLadder(draft)
    if (!read.ok) return setFault(read.error.message)
    write(null)
    if (ladderWords(read.value) !== words) onLadder(read.value)
  }
  const handleKey = (event: KeyboardEvent): void => {
    if (event.key === 'Enter') {
      event.preventDefault()
      keep()
    } else if (event.key === 'Escape' && draft !== null) {
      event.preventDefault()
      event.stopPropagation()
      write(null)
    }
  }
  return (
    <div className="min-w-0">
      <input
        aria-label="How the loop gets faster"
        aria-describedby={fault ? id : undefined}
        aria-invalid={fault ? true : undefined}
        autoComplete="off"
        spellCheck={false}
        maxLength={120}
        disabled={disabled}
        value={shown}
        className="dotted-edit plumb-part block h-7 max-w-full min-w-40 bg-transparent p-0 text-ink disabled:border-transparent disabled:text-pencil aria-invalid:border-fault"
        style={{ '--chars': shown.length + 1 } as CSSProperties}
        onChange={(event) => write(event.target.value)}
        onBlur={keep}
        onKeyDown={handleKey}
      />
      <div role="status">{fault ? <FieldFaultText id={id}>{fault}</FieldFaultText> : null}</div>
    </div>
  )
}
