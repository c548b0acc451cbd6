// Listening with numbers: what the committed file holds, measured after decoding it.
import type { Clock } from './clock'
import type { DemoNote } from './demo-types'
import { attackNear, quantile } from './onsets'
import { decode, decodedRate, durationOf, loudnessOf, type Loudness } from './synth'

export interface Figures extends Loudness {
  durationSec: number
  bars: number
  notes: number
  /** Share of the energy below 300 Hz. */
  lowShare: number
  tempo: { slowest: number; fastest: number }
  /** Heard attack minus written truth over the notes, in milliseconds, and the share of notes within 15 ms. */
  onsetMs: Spread
  /** The same for the bass by itself, sent through the same chain: cymbals and piano do not speak for it there. */
  bassOnsetMs: Spread
}

export interface Spread {
  median: number
  p10: number
  p90: number
  within15: number
}

const round = (value: number, places = 1) => Math.round(value * 10 ** places) / 10 ** places

export function figuresOf(file: string, bassFile: string, notes: DemoNote[], clock: Clock): Figures {
  const samples = decode(file)
  let all = 0
  let low = 0
  // One pole at 300 Hz, twice, is enough to tell a bass from a cymbal.
  const share = 1 - Math.exp((-2 * Math.PI * 300) / decodedRate)
  let [one, two] = [0, 0]
  for (const sample of samples) {
    one += share * (sample - one)
    two += share * (one - two)
    all += sample ** 2
    low += two ** 2
  }
  const lines = Array.from({ length: clock.lastBar - clock.firstBar + 1 }, (_, index) => clock.firstBar + index)
  const tempos = lines.map((bar) => (60 * clock.beatsInBar) / (clock.barSec(bar + 1) - clock.barSec(bar)))
  return {
    ...loudnessOf(file),
    durationSec: round(durationOf(file), 3),
    bars: clock.lastBar - Math.max(1, clock.firstBar) + 1,
    notes: notes.length,
    lowShare: round(low / all, 2),
    tempo: { slowest: round(Math.min(...tempos)), fastest: round(Math.max(...tempos)) },
    onsetMs: attacks(samples, notes),
    bassOnsetMs: attacks(bassFile === file ? samples : decode(bassFile), notes)
  }
}

function attacks(samples: Float32Array, notes: DemoNote[]): Spread {
  const off = notes
    .filter((note) => !note.ghost)
    .map((note) => (attackNear(samples, decodedRate, note.onsetSec) - note.onsetSec) * 1000)
  return {
    median: round(quantile(off, 0.5)),
    p10: round(quantile(off, 0.1)),
    p90: round(quantile(off, 0.9)),
    within15: round(off.filter((ms) => Math.abs(ms) <= 15).length / off.length, 2)
  }
}
