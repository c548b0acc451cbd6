import { useEffect, useRef } from 'react'
import type { Sec } from '@shared/units'
import { Icon } from '@client/ui/icon'

/** An event is seldom later than this; beyond it its stamp is of another clock. */
const oldestMs = 200

/** How long ago the hand fell: a busy page hands events over late. */
export const eventAgeSec = (stampMs: number, nowMs: number): Sec => {
  const age = nowMs - stampMs
  return age > 0 && age < oldestMs ? age / 1000 : 0
}

interface TapPadProps {
  /** What to tap: "Tap every beat". */
  label: string
  onTap(ageSec: Sec): void
}

/** Wide enough for a thumb. Counts when the hand comes down, not when it leaves. */
export function TapPad({ label, onTap }: TapPadProps) {
  const pad = useRef<HTMLButtonElement>(null)
  useEffect(() => {
    pad.current?.focus()
  }, [])
  return (
    <button
      ref={pad}
      type="button"
      aria-keyshortcuts="T"
      className="flex min-h-24 w-full touch-manipulation items-center justify-center gap-3 rounded border-2 border-ink bg-sheet px-4 text-lg font-semibold select-none active:bg-wash"
      onPointerDown={(event) => {
        if (event.button === 0) onTap(eventAgeSec(event.timeStamp, performance.now()))
      }}
      onKeyDown={(event) => {
        if (event.key !== ' ' && event.key !== 'Enter') return
        // The tap is the key coming down; the click that would follow is not another one.
        event.preventDefault()
        if (!event.repeat) onTap(eventAgeSec(event.timeStamp, performance.now()))
      }}
      onKeyUp={(event) => {
        if (event.key === ' ') event.preventDefault()
      }}
      onClick={(event) => {
        // Pressed by assistive technology: no pointer or key came before.
        if (event.detail === 0) onTap(0)
      }}
    >
      <Icon name="tap" size={24} />
      {label}
    </button>
  )
}
