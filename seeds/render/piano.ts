// The piano: rootless voicings that move as little as they can, in short figures that leave the beat to the others.
import { chordAt, formOf } from '@shared/music/form'
import { type Clock, swung } from './clock'
import type { TakePlan } from './demo-types'
import { levelAt } from './dynamics'
import { midiOf } from './line-text'
import { type Random, randomFrom } from './random'

export interface Chord {
  from: number
  to: number
  midis: number[]
  velocity: number
}

/** Semitones above the root, lowest voice first; the player's usual two or three hands-on shapes for each kind. */
const shapes: Record<string, [number[], ...number[][]]> = {
  // Over a chord that stands still: fourths that slide up and down the mode beside the plain shapes.
  m7: [
    [3, 7, 10, 14],
    [10, 14, 15, 19],
    [5, 10, 15, 19],
    [7, 12, 17, 21],
    [2, 7, 12, 15]
  ],
  '7': [
    [4, 9, 10, 14],
    [10, 14, 16, 21]
  ],
  '7b9': [
    [4, 7, 10, 13],
    [10, 13, 16, 19]
  ],
  m6: [
    [3, 7, 9, 14],
    [9, 14, 15, 19]
  ]
}

/** Beat from 0 and length; a place past the bar's last beat pushes the next bar's chord. */
const figures: [[number, number][], ...[number, number][][]] = [
  [
    [0, 1.3],
    [1.5, 0.4]
  ],
  [[1.5, 1.6]],
  [
    [1, 0.4],
    [2.5, 1.2]
  ],
  [[3.5, 1.3]],
  [
    [0.5, 0.4],
    [2, 0.5]
  ],
  [],
  [
    [1.5, 0.4],
    [3, 0.6]
  ]
]

export function comping(plan: TakePlan, clock: Clock): Chord[] {
  const { piano } = plan
  if (!piano) return []
  const random = randomFrom(`${plan.slug} piano`)
  const form = formOf(plan.tune.chart)
  const formBarOf = (bar: number) => {
    const mark = plan.form.filter((each) => each.bar <= bar).at(-1)
    return mark && mark.formBar !== null ? ((mark.formBar - 1 + bar - mark.bar) % form.bars.length) + 1 : null
  }
  const played: Chord[] = []
  let hand = [53, 58, 62, 65]
  for (let bar = piano.from; bar <= piano.until; bar++) {
    if (piano.silent && bar >= piano.silent[0] && bar <= piano.silent[1]) continue
    for (const [beats, length] of random.pick(figures)) {
      const pushed = beats >= clock.beatsInBar - 0.5
      const formBar = formBarOf(pushed ? bar + 1 : bar)
      // A figure that begins on the and of a beat already sounds the chord of the next one.
      const beat = pushed ? 1 : Math.floor(beats + 0.5) + 1
      const text = formBar === null ? undefined : chordAt(form, formBar, { n: beat, d: 1 })?.text
      if (!text) continue
      hand = nearest(text, hand, random)
      const from = clock.sec(bar, swung(beats, plan.swing)) + 0.004 + 0.006 * random.normal()
      const to = clock.sec(bar, swung(beats + length, plan.swing))
      const velocity = 58 + 0.8 * levelAt(plan, bar) + 5 * random.normal()
      played.push({ from, to, midis: hand, velocity: Math.round(Math.min(92, Math.max(36, velocity))) })
    }
  }
  return played.map((chord, index) => ({ ...chord, to: Math.min(chord.to, (played[index + 1]?.from ?? 1e9) - 0.02) }))
}

/** The shape and octave nearest to where the hand lies, mostly; now and then the next nearest, so that it moves. */
function nearest(chord: string, hand: number[], random: Random): number[] {
  const [, root = 'C', kind = ''] = /^([A-G]b?)(.*)$/.exec(chord) ?? []
  const kinds = shapes[kind]
  if (!kinds) throw new Error(`no voicing for ${chord}`)
  const rootMidi = midiOf(`${root}3`)
  const ranked = kinds
    .flatMap((shape) => [-12, 0, 12].map((octave) => shape.map((step) => rootMidi + octave + step)))
    .filter((midis) => (midis[0] ?? 0) >= 51 && (midis.at(-1) ?? 99) <= 76)
    .map((midis) => ({
      midis,
      way: midis.reduce((sum, midi, voice) => sum + Math.abs(midi - (hand[voice] ?? midi)), 0)
    }))
    .sort((a, b) => a.way - b.way)
  return (ranked[random.next() < 0.4 ? 1 : 0] ?? ranked[0])?.midis ?? hand
}
