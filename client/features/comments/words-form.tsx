import { useEffect, useRef, type KeyboardEvent, type ReactNode } from 'react'
import { Button } from '@client/ui/button'
import { TextArea } from '@client/ui/text-area'

export interface WordsFormProps {
  label: ReactNode
  labelHidden?: boolean
  placeholder?: string
  /** What the button says. */
  does: string
  look?: 'primary' | 'plain'
  text: string
  maxLength: number
  rows?: number
  /** Takes the focus when it appears. */
  isFocused?: boolean
  onText: (text: string) => void
  onDone: () => void
  onCancel?: () => void
  onFocus?: () => void
  /** Beside the button. */
  children?: ReactNode
}

/** A box for words and the button that says them; Ctrl or Command and Enter does the same. */
export function WordsForm(props: WordsFormProps) {
  const { text, onText, onDone, onCancel, isFocused = false } = props
  const form = useRef<HTMLFormElement>(null)
  useEffect(() => {
    if (isFocused) form.current?.querySelector('textarea')?.focus()
  }, [isFocused])
  const isEmpty = text.trim() === ''
  const done = () => {
    if (!isEmpty) onDone()
  }
  const handleKey = (event: KeyboardEvent) => {
    if (event.key === 'Enter' && (event.ctrlKey || event.metaKey)) {
      event.preventDefault()
      done()
    }
    if (event.key === 'Escape' && onCancel) {
      event.stopPropagation()
      onCancel()
    }
  }
  return (
    <form
      ref={form}
      className="grid gap-2"
      onSubmit={(event) => {
        event.preventDefault()
        done()
      }}
    >
      <TextArea
        label={props.label}
        labelHidden={props.labelHidden}
        placeholder={props.placeholder}
        rows={props.rows ?? 2}
        maxLength={props.maxLength}
        value={text}
        onChange={(event) => onText(event.target.value)}
        onKeyDown={handleKey}
        onFocus={props.onFocus}
      />
      <div className="flex flex-wrap items-center gap-x-3 gap-y-1">
        <Button type="submit" look={props.look ?? 'plain'} disabled={isEmpty}>
          {props.does}
        </Button>
        {onCancel ? (
          <Button look="quiet" onClick={onCancel}>
            Never mind
          </Button>
        ) : null}
        {props.children}
      </div>
    </form>
  )
}
