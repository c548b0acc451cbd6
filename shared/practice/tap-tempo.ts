// Tapping along to find a tempo, and saying how it stands to the take's.
import { robustSpread } from '@shared/timing/statistics'
import { countSteps } from '@shared/timing/tap-steps'
import type { Sec } from '@shared/units'

export interface TapTempo {
  /** Beats a minute. */
  bpm: number
  /** How far single gaps are from it, as beats a minute (standard deviation; a slip does not count). */
  spreadBpm: number
  /** Taps it was reckoned from. */
  taps: number
}

/** A longer pause than this ends one try and opens another: the slowest beat tapped is 20 a minute. */
const NEW_TRY_SEC = 3
const MIN_TAPS = 3
/** So many taps back still say what the tempo is now. */
const MAX_TAPS = 24

/**
 * Tempo of the last try in rising tap times (seconds at the wall): the straight line through taps against the beats they were
 * meant for, left-out and doubled taps recognised (see `countSteps`). Null before the third tap.
 */
export const tapTempo = (taps: readonly Sec[]): TapTempo | null => {
  const from = taps.reduce((start, tap, i) => (i > 0 && tap - (taps[i - 1] as Sec) <= NEW_TRY_SEC ? start : i), 0)
  const last = taps.slice(from).slice(-MAX_TAPS)
  if (last.length < MIN_TAPS) return null
  const beats = countSteps(last).map(({ index, step }) => ({ step, sec: last[index] as Sec }))
  if (beats.length < MIN_TAPS) return null
  const periodSec = slope(beats)
  if (!(periodSec > 0)) return null
  const gaps = beats.slice(1).map(({ step, sec }, i) => {
    const before = beats[i] as { step: number; sec: Sec }
    return (sec - before.sec) / (step - before.step)
  })
  const bpm = 60 / periodSec
  return { bpm, spreadBpm: (bpm * robustSpread(gaps)) / periodSec, taps: beats.length }
}

/** Nearer than this two tempos are the same to the hand. */
const SAME = 0.01
/** Further off than this from the same, half and double it is another tempo altogether. */
const OTHER = 0.25
const MULTIPLES = [
  { factor: 1, words: null },
  { factor: 0.5, words: 'half time' },
  { factor: 2, words: 'double time' }
] as const

/**
 * `you tap 92, the take plays 88 here: 5 % faster`, `... 176 here: half time`, `... half time, 5 % faster`, `... the same`.
 * Both in beats a minute, the take's at the speed it plays now.
 */
export const compareTempo = (tapped: number, taken: number): string => {
  const both = `you tap ${Math.round(tapped)}, the take plays ${Math.round(taken)} here`
  if (!(tapped > 0) || !(taken > 0)) return both
  const distance = ({ factor }: { factor: number }) => Math.abs(Math.log(tapped / taken / factor))
  const near = [...MULTIPLES].sort((a, b) => distance(a) - distance(b))[0] as (typeof MULTIPLES)[number]
  const off = tapped / taken / near.factor - 1
  if (Math.abs(off) > OTHER) return both
  const percent = Math.max(1, Math.round(Math.abs(off) * 100))
  const difference = Math.abs(off) < SAME ? null : `${percent} % ${off > 0 ? 'faster' : 'slower'}`
  return `${both}: ${[near.words, difference].filter((words) => words !== null).join(', ') || 'the same'}`
}

/** Least-squares line. */
const slope = (beats: readonly { step: number; sec: Sec }[]): number => {
  const mean = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length
  const [step, sec] = [mean(beats.map((beat) => beat.step)), mean(beats.map((beat) => beat.sec))]
  const over = beats.reduce((sum, beat) => sum + (beat.step - step) * (beat.sec - sec), 0)
  return over / beats.reduce((sum, beat) => sum + (beat.step - step) ** 2, 0)
}
