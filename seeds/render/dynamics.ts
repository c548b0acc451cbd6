import type { TakePlan } from './demo-types'

/** Louder or softer at a bar, in MIDI velocity: a phrase of eight bars rises and falls, on top of the take's own plan. */
export function levelAt({ dynamics }: TakePlan, bar: number, beats = 0, beatsInBar = 4): number {
  const planned = Object.keys(dynamics)
    .map(Number)
    .filter((from) => from <= bar)
    .sort((a, b) => b - a)[0]
  const phrase = (((bar - 1 + beats / beatsInBar) % 8) + 8) % 8
  return (planned === undefined ? 0 : (dynamics[planned] ?? 0) * 1.5) + 11 * Math.sin((Math.PI * phrase) / 8)
}
