// Tapping along to find a tempo and hear how it stands to the take's.
import { useState } from 'react'
import { useScope } from '@client/lib/scope'
import { compareTempo, tapTempo } from '@shared/practice/tap-tempo'
import type { Sec } from '@shared/units'

export interface TapTempoControls {
  tap: () => void
  /** What the taps say so far; null when nobody has tapped for a while. */
  words: string | null
}

/** What was found stays to be read this long after the last tap, ms. */
const keepMs = 20_000
const mostTaps = 100

/** `tempoNow`: felt beats a minute that are heard now; null without bars. */
export const useTapTempo = (tempoNow: () => number | null): TapTempoControls => {
  const [taps, setTaps] = useState<readonly Sec[]>([])
  const [heard, setHeard] = useState<number | null>(null)
  useScope(
    (scope) => {
      if (taps.length > 0) scope.timeout(() => setTaps([]), keepMs)
    },
    [taps]
  )
  return {
    tap: () => {
      const now = performance.now() / 1000
      setTaps((before) => [...before.slice(1 - mostTaps), now])
      setHeard(tempoNow())
    },
    words: taps.length > 0 ? tapWords(taps, heard) : null
  }
}

export const tapWords = (taps: readonly Sec[], taken: number | null): string => {
  const tapped = tapTempo(taps)
  if (!tapped) return 'tap on, on every beat'
  return taken === null ? `you tap ${Math.round(tapped.bpm)} beats a minute` : compareTempo(tapped.bpm, taken)
}
