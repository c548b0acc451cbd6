// The one way a hand changes bars, from the panel and from the timeline: tried first, refused with a sentence.
import { useState } from 'react'
import { ok } from '@shared/result'
import { barMapDocument } from '@shared/timing/bar-map-document'
import { dragBarLine, type Gesture } from '@shared/timing/bar-map-gestures'
import type { BarMapOperation } from '@shared/timing/bar-map-schema'
import type { BarMapBody } from '@shared/timing/types'
import type { BarIndex, Sec } from '@shared/units'
import { freshId } from '@client/lib/ids'
import type { LiveBarMap } from '@client/features/bar-maps/use-bar-map'

export interface BarEdits {
  /** Why the last gesture was refused; null after one that was taken. */
  fault: string | null
  clearFault(): void
  /** Sends what the gesture asks for, or keeps its sentence; true when it was sent. */
  run(gesture: (body: BarMapBody) => Gesture): boolean
  /** For the timeline: a bar's line was dragged or nudged to this moment. */
  moveBar(bar: BarIndex, sec: Sec): void
}

/** An operation without arguments to reckon, tried on the body. */
export const attempt = (body: BarMapBody, operation: BarMapOperation): Gesture => {
  const tried = barMapDocument.apply(body, operation)
  return tried.ok ? ok(operation) : tried
}

export const useBarEdits = (document: LiveBarMap): BarEdits => {
  const [fault, setFault] = useState<string | null>(null)
  const run = (gesture: (body: BarMapBody) => Gesture): boolean => {
    if (!document.body) return false
    const asked = gesture(document.body)
    setFault(asked.ok ? null : asked.error.message)
    if (asked.ok) document.edit([asked.value])
    return asked.ok
  }
  return {
    fault,
    clearFault: () => setFault(null),
    run,
    moveBar: (bar, sec) => void run((body) => dragBarLine(body, bar, sec, freshId))
  }
}
