// A click at a steady tempo that a hand is measured against.
import { createScope } from '@client/lib/scope'
import type { Sec } from '@shared/units'

export interface ClickTrack {
  /** Moments at which each click is heard, in seconds of `now()`. */
  beats: readonly Sec[]
  now(): Sec
  stop(): void
}

export type StartClicks = () => Promise<ClickTrack | null>

const gapSec = 0.6
const count = 20
const leadSec = 0.4
// Moderate on purpose, and soft-edged so that nothing cracks.
const level = 0.25
const clickSec = 0.03

/** Twenty clicks at 100 a minute through Web Audio; null where the browser has none or gives no sound. */
export const startClicks: StartClicks = async () => {
  if (typeof AudioContext === 'undefined') return null
  const context = new AudioContext()
  const scope = createScope()
  scope.add(() => void context.close())
  await context.resume()
  if (context.state !== 'running') {
    scope.dispose()
    return null
  }
  const now = (): Sec => performance.now() / 1000
  // What is scheduled for a moment of the context leaves the loudspeaker later by the output's latency.
  const ahead = now() - context.currentTime + (context.outputLatency || context.baseLatency || 0)
  const whens = Array.from({ length: count }, (_, i) => context.currentTime + leadSec + i * gapSec)
  for (const [i, when] of whens.entries()) {
    const tone = context.createOscillator()
    const gain = context.createGain()
    tone.frequency.value = i % 4 === 0 ? 1320 : 990
    gain.gain.setValueAtTime(0, when)
    gain.gain.linearRampToValueAtTime(level, when + 0.002)
    gain.gain.exponentialRampToValueAtTime(0.001, when + clickSec)
    tone.connect(gain).connect(context.destination)
    tone.start(when)
    tone.stop(when + clickSec)
  }
  return { beats: whens.map((when) => when + ahead), now, stop: scope.dispose }
}
