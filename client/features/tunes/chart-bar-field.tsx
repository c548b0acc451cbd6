import { useRef, useState, type KeyboardEvent } from 'react'
import { chartDocument } from '@shared/music/chart-document'
import { chartLimits } from '@shared/music/chart-schema'
import type { ChartBody } from '@shared/music/types'
import { controlClass, FieldFaultText } from '@client/ui/field'
import { cx } from '@client/ui/classes'

export interface ChartBarFieldProps {
  body: ChartBody
  sectionId: string
  /** From 0 in its section. */
  index: number
  /** Names the bar: "Bar 3 of A". */
  label: string
  /** Only ever called with a bar that can be read and that has changed. */
  onKeep(text: string): void
  /** After Enter or Tab (1) and with Shift (-1): the bar there wants to be edited. */
  onMove(step: 1 | -1): void
  /** Esc (`byKey`), or the focus went elsewhere with a bar that can be read. */
  onClose(byKey: boolean): void
}

/** Why the bar cannot be read, in a sentence; null when it can. */
export const barFault = (body: ChartBody, sectionId: string, index: number, text: string): string | null => {
  const checked = chartDocument.apply(body, { kind: 'setBar', sectionId, index, text })
  return checked.ok ? null : checked.error.message
}

/** One bar typed where it stands: Enter goes to the next bar, Esc takes the typing back, a fault stays beside it. */
export function ChartBarField({ body, sectionId, index, label, onKeep, onMove, onClose }: ChartBarFieldProps) {
  const written = body.sections.find(({ id }) => id === sectionId)?.bars[index] ?? ''
  const [text, setText] = useState(written)
  const [fault, setFault] = useState<string | null>(null)
  // A field that leaves the page may lose the focus once more.
  const isDone = useRef(false)
  const faultId = `fault-${sectionId}-${index}`

  /** True when what stands here is kept. */
  const keep = (): boolean => {
    const bar = text.trim()
    if (bar === written) return true
    const found = barFault(body, sectionId, index, bar)
    setFault(found)
    if (found === null) onKeep(bar)
    return found === null
  }
  const handleKey = (event: KeyboardEvent<HTMLInputElement>): void => {
    if (event.nativeEvent.isComposing) return
    if (event.key === 'Escape') {
      event.preventDefault()
      event.stopPropagation()
      isDone.current = true
      onClose(true)
    } else if (event.key === 'Enter' || event.key === 'Tab') {
      event.preventDefault()
      if (!keep()) return
      isDone.current = true
      onMove(event.shiftKey ? -1 : 1)
    }
  }
  return (
    <div className="grid min-w-0 gap-1">
      <input
        // The bar was clicked, or reached by Enter from the one before.
        // oxlint-disable-next-line jsx-a11y/no-autofocus
        autoFocus
        aria-label={label}
        aria-invalid={fault ? true : undefined}
        aria-describedby={fault ? faultId : undefined}
        autoComplete="off"
        autoCapitalize="off"
        spellCheck={false}
        maxLength={chartLimits.barText}
        className={cx(controlClass, 'h-9 px-2')}
        value={text}
        onFocus={(event) => event.currentTarget.select()}
        onChange={(event) => {
          setText(event.target.value)
          if (fault) setFault(barFault(body, sectionId, index, event.target.value.trim()))
        }}
        onKeyDown={handleKey}
        onBlur={() => {
          if (!isDone.current && keep()) onClose(false)
        }}
      />
      {fault ? (
        <div role="alert">
          <FieldFaultText id={faultId}>{fault}</FieldFaultText>
        </div>
      ) : null}
    </div>
  )
}
