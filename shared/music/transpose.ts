// Chords, bars and whole charts in another key. A transposition is a number of semitones and a step on the line of
// fifths, so that every name moves with the key: in A♭ the F♭ stays a flat name a tone up, G♭ in B♭.
import { readBar } from '@shared/music/chart'
import { readChord, type Chord, type ChordFault } from '@shared/music/chord'
import { cutSymbol, plainSigns } from '@shared/music/chord-notation'
import { fifthsShift, keyText, readKey, transposeKey } from '@shared/music/key'
import {
  fifthsOfNote,
  modulo,
  noteAtFifths,
  noteFromText,
  noteText,
  pitchClassOf,
  type NoteName
} from '@shared/music/pitch'
import type { ChartBody } from '@shared/music/types'
import { ok, type Result } from '@shared/result'
import { readMeter } from '@shared/timing/meter'

export interface Transposition {
  semitones: number
  /** The same on the line of fifths: what it does to names. */
  fifths: number
}

/** Which part the player reads: what is written for a B♭ instrument is a whole tone above what sounds, for E♭ a major sixth. */
export const INSTRUMENT_SEMITONES = { C: 0, 'B♭': 2, 'E♭': 9 } as const
export type InstrumentPitch = keyof typeof INSTRUMENT_SEMITONES

/** A transposition out of a key with this signature (flats negative), ending where fewest signs are needed (six: flats). */
export const transposition = (semitones: number, signatureFifths = 0): Transposition => ({
  semitones,
  fifths: fifthsShift(signatureFifths, semitones)
})

// F♭ to B♯: names beyond carry two accidentals and are not written over bars.
const [FLATTEST, SHARPEST] = [-8, 12]

function moveName(name: NoteName, by: Transposition): NoteName {
  if (modulo(by.semitones, 12) === 0) return name
  const fifths = fifthsOfNote(name) + by.fifths
  if (fifths < FLATTEST) return noteAtFifths(fifths + 12 * Math.ceil((FLATTEST - fifths) / 12))
  return noteAtFifths(fifths > SHARPEST ? fifths - 12 * Math.ceil((fifths - SHARPEST) / 12) : fifths)
}

/** The chord moved; its quality is untouched. */
export function transposeChord(chord: Chord, by: Transposition): Chord {
  if (chord.noChord) return chord
  const root = moveName(noteFromText(chord.rootName), by)
  const bass = chord.bassName === null ? null : moveName(noteFromText(chord.bassName), by)
  return {
    ...chord,
    root: pitchClassOf(root),
    rootName: noteText(root),
    bass: bass ? pitchClassOf(bass) : null,
    bassName: bass ? noteText(bass) : null
  }
}

/** The symbol as typed with root and bass moved: `Ebm7(b5)/A` up a tone is `Fm7(b5)/B`. */
export function transposeChordText(text: string, by: Transposition): Result<string, ChordFault> {
  const read = readChord(text)
  if (!read.ok) return read
  const cut = cutSymbol(plainSigns(text))
  const moved = transposeChord(read.value, by)
  if (!cut || moved.noChord) return ok(text)
  return ok(`${moved.rootName}${afterRoot(cut.descriptor)}${moved.bassName === null ? '' : `/${moved.bassName}`}`)
}

// `C (b5)` and `C b5` must not close up to C♭ five.
const afterRoot = (descriptor: string): string => (/^[b#]/u.test(descriptor) ? `(${descriptor})` : descriptor)

/** A bar as typed with every chord moved; holds, `%` and what cannot be read stay as they are. */
export function transposeBarText(text: string, meter: Parameters<typeof readBar>[1], by: Transposition): string {
  const bar = readBar(text, meter)
  if (!bar.ok || bar.value.kind !== 'chords') return text
  let rest = text
  let moved = ''
  for (const { text: symbol } of bar.value.chords) {
    // Blanks inside a symbol may have been several.
    const first = symbol.split(' ')[0] ?? symbol
    const at = rest.indexOf(first)
    const length = spanOf(rest.slice(at), symbol)
    const transposed = transposeChordText(symbol, by)
    moved += rest.slice(0, at) + (transposed.ok ? transposed.value : symbol)
    rest = rest.slice(at + length)
  }
  return moved + rest
}

function spanOf(rest: string, symbol: string): number {
  let length = 0
  for (const sign of symbol) {
    if (sign === ' ') while (/\s/u.test(rest[length] ?? '')) length += 1
    else length += sign.length
  }
  return length
}

/** The chart for another instrument or in another key: texts and key move, everything else stays. */
export function transposeChart(body: ChartBody, semitones: number): ChartBody {
  const key = readKey(body.key)
  const by = transposition(semitones, key.ok ? key.value.fifths : 0)
  const meter = readMeter(body.meter)
  if (!meter || modulo(semitones, 12) === 0) return body
  return {
    ...body,
    key: key.ok ? keyText(transposeKey(key.value, semitones)) : body.key,
    sections: body.sections.map((section) => ({
      ...section,
      bars: section.bars.map((bar) => transposeBarText(bar, meter, by))
    }))
  }
}
