import { useId } from 'react'
import type { CSSProperties, ReactNode } from 'react'

export interface SliderProps {
  label: ReactNode
  /** The value in words, shown beside the label and spoken: "60 %, 84 beats a minute". */
  says: string
  value: number
  min: number
  max: number
  /** Arrow keys move by this; Page Up and Page Down by `bigStep` (ten steps if not given). */
  step?: number
  bigStep?: number
  disabled?: boolean
  onChange: (value: number) => void
  /** At the end of a drag or key press, for work too heavy for every step. */
  onCommit?: (value: number) => void
}

export function Slider(props: SliderProps) {
  const { label, says, value, min, max, step = 1, bigStep = step * 10, disabled, onChange, onCommit } = props
  const id = useId()
  const filled = max > min ? ((value - min) / (max - min)) * 100 : 0
  const clamp = (next: number) => Math.min(max, Math.max(min, next))
  return (
    <div className="grid min-w-0">
      <label htmlFor={id} className="flex flex-wrap gap-x-2 text-xs text-pencil">
        <span>{label}</span>
        <span aria-hidden="true">{says}</span>
      </label>
      <input
        id={id}
        type="range"
        className="plumb-slider"
        style={{ '--filled': `${Math.min(100, Math.max(0, filled))}%` } as CSSProperties}
        min={min}
        max={max}
        step={step}
        value={value}
        disabled={disabled}
        aria-valuetext={says}
        onChange={(event) => onChange(event.target.valueAsNumber)}
        onPointerUp={(event) => onCommit?.(event.currentTarget.valueAsNumber)}
        onKeyUp={(event) => onCommit?.(event.currentTarget.valueAsNumber)}
        onKeyDown={(event) => {
          const by = event.key === 'PageUp' ? bigStep : event.key === 'PageDown' ? -bigStep : 0
          if (by === 0) return
          event.preventDefault()
          onChange(clamp(value + by))
        }}
      />
    </div>
  )
}
