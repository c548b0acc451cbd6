// A setting that reads as a sentence: "60 % to 100 %, up 5 after 4 times", its parts edited where they stand.
import { useState } from 'react'
import type { CSSProperties, ReactNode } from 'react'

export interface SentenceProps {
  /** Names the whole: "Faster". */
  label: string
  children: ReactNode
}

export function Sentence({ label, children }: SentenceProps) {
  return (
    <fieldset aria-label={label} className="min-w-0 leading-7">
      {children}
    </fieldset>
  )
}

export interface SentenceNumberProps {
  /** What the number is, for assistive technology: "starting speed". */
  label: string
  value: number
  /** Follows the number: " %", " times". */
  unit?: string
  min: number
  max: number
  step?: number
  onChange: (value: number) => void
}

// The part is as wide as what stands in it, and never a smaller target than 24 px.
const partClass =
  'dotted-edit inline-block h-6 min-w-6 bg-transparent p-0 text-center font-semibold text-ink plumb-part'

/** Type a number (Enter or leaving keeps it, Esc takes it back), or step it with up and down. */
export function SentenceNumber({ label, value, unit = '', min, max, step = 1, onChange }: SentenceNumberProps) {
  const [draft, setDraft] = useState<string | null>(null)
  const shown = draft ?? `${value}${unit}`

  function keep(next: number) {
    setDraft(null)
    const clamped = Math.min(max, Math.max(min, next))
    if (Number.isFinite(clamped) && clamped !== value) onChange(clamped)
  }

  return (
    <input
      role="spinbutton"
      inputMode="decimal"
      autoComplete="off"
      aria-label={label}
      aria-valuenow={value}
      aria-valuemin={min}
      aria-valuemax={max}
      aria-valuetext={`${value}${unit}`}
      className={partClass}
      style={{ '--chars': shown.length + 1 } as CSSProperties}
      value={shown}
      onFocus={(event) => {
        setDraft(String(value))
        const field = event.currentTarget
        queueMicrotask(() => field.select())
      }}
      onChange={(event) => setDraft(event.target.value)}
      onBlur={() => (draft === null || draft.trim() === '' ? setDraft(null) : keep(parseTyped(draft)))}
      onKeyDown={(event) => {
        if (event.key === 'Enter') {
          event.preventDefault()
          if (draft?.trim()) keep(parseTyped(draft))
        } else if (event.key === 'Escape' && draft !== null) {
          event.stopPropagation()
          setDraft(String(value))
        } else if (event.key === 'ArrowUp' || event.key === 'ArrowDown') {
          event.preventDefault()
          const typed = draft === null ? Number.NaN : parseTyped(draft)
          keep((Number.isFinite(typed) ? typed : value) + (event.key === 'ArrowUp' ? step : -step))
        }
      }}
    />
  )
}

// Accepts a comma as decimal sign and ignores a unit typed along.
const parseTyped = (text: string) => Number.parseFloat(text.replace(',', '.'))

export interface SentenceChoiceProps<V extends string> {
  label: string
  value: V
  choices: readonly { value: V; label: string }[]
  onChange: (value: V) => void
}

/** A word of the sentence that can be another word. */
export function SentenceChoice<V extends string>({ label, value, choices, onChange }: SentenceChoiceProps<V>) {
  return (
    <select
      aria-label={label}
      value={value}
      onChange={(event) => onChange(event.target.value as V)}
      className="dotted-edit h-6 min-w-6 appearance-none bg-transparent p-0 text-ink field-sizing-content"
    >
      {choices.map((choice) => (
        <option key={choice.value} value={choice.value} className="bg-sheet">
          {choice.label}
        </option>
      ))}
    </select>
  )
}
