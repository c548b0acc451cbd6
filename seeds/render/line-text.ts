// Lines are composed as text, one string a bar: `G1 Bb1e (D2)e F2h` is a quarter, a swung pair whose second note is a
// ghost, and a half. Lengths: w 4, H 3, h 2, Q 3/2, q 1 (when none is given), d 2/3, e 1/2, t 1/3 beats. `r` rests, `_`
// holds the note before, `G1+B2` are stacked notes, `>` after a note accents it.
import type { Rational } from '@shared/timing/types'

export interface WrittenNote {
  bar: number
  beat: Rational
  lengthBeats: Rational
  midis: number[]
  ghost: boolean
  accent: boolean
}

const lengths: Record<string, Rational> = {
  w: { n: 4, d: 1 },
  H: { n: 3, d: 1 },
  h: { n: 2, d: 1 },
  Q: { n: 3, d: 2 },
  q: { n: 1, d: 1 },
  d: { n: 2, d: 3 },
  e: { n: 1, d: 2 },
  t: { n: 1, d: 3 }
}
const naturals: Record<string, number> = { C: 0, D: 2, E: 4, F: 5, G: 7, A: 9, B: 11 }
const accidentals: Record<string, number> = { '': 0, b: -1, '#': 1 }

const divisor = (a: number, b: number): number => (b === 0 ? a : divisor(b, a % b))
const plus = (a: Rational, b: Rational): Rational => {
  const n = a.n * b.d + b.n * a.d
  const d = a.d * b.d
  const common = divisor(n, d)
  return { n: n / common, d: d / common }
}

/** MIDI number of a written name; C4 is 60, the bass's low E is E1. */
export function midiOf(name: string): number {
  const [, letter = '', accidental = '', octave = ''] = /^([A-G])([b#]?)(\d)$/.exec(name) ?? []
  if (!letter) throw new Error(`no pitch: ${name}`)
  return 12 * (Number(octave) + 1) + (naturals[letter] ?? 0) + (accidentals[accidental] ?? 0)
}

export function readLine(bars: string[], firstBar: number, beatsInBar: number): WrittenNote[] {
  const notes: WrittenNote[] = []
  bars.forEach((text, index) => {
    const bar = firstBar + index
    let beat: Rational = { n: 1, d: 1 }
    for (const token of text.split(/\s+/).filter(Boolean)) {
      const parts = /^(\(?)(r|_|[A-G][b#]?\d(?:\+[A-G][b#]?\d)*)\)?([wHhQqdet]?)(>?)$/.exec(token)
      if (!parts) throw new Error(`bar ${bar}: cannot read ${token}`)
      const [, open, pitch = '', letter, accent] = parts
      const lengthBeats = lengths[letter || 'q'] ?? { n: 1, d: 1 }
      const before = notes.at(-1)
      if (pitch === '_' && before) before.lengthBeats = plus(before.lengthBeats, lengthBeats)
      else if (pitch !== 'r')
        notes.push({ bar, beat, lengthBeats, midis: pitch.split('+').map(midiOf), ghost: !!open, accent: !!accent })
      beat = plus(beat, lengthBeats)
    }
    if (beat.n !== (beatsInBar + 1) * beat.d) throw new Error(`bar ${bar} does not add up: ${text}`)
  })
  return notes
}
