// Keys as typed, their signature, and the spelling of any pitch class in them.
import { err, ok, type Result } from '@shared/result'
import type { PitchClass } from '@shared/units'
import {
  fifthsOfNote,
  modulo,
  noteAtFifths,
  noteText,
  noteWords,
  pitchClassAtFifths,
  readNoteName,
  type NoteName
} from '@shared/music/pitch'

/** Signature of each mode against the major key on the same tonic, in fifths. */
const MODE_FIFTHS = {
  lydian: 1,
  major: 0,
  mixolydian: -1,
  dorian: -2,
  minor: -3,
  phrygian: -4,
  locrian: -5
} as const

export type Mode = keyof typeof MODE_FIFTHS

export interface Key {
  tonic: NoteName
  mode: Mode
  /** Sharps of the signature, flats negative. */
  fifths: number
}

/** Longest key text that is looked at. */
export const MAX_KEY_TEXT = 32

const MODE_WORDS: [RegExp, Mode][] = [
  [/^(?:|M|[mM]aj?\.?|major|ionian)$/u, 'major'],
  [/^(?:m|-|−|[mM]in?\.?|minor|aeolian)$/u, 'minor'],
  [/^dor(?:ian)?$/u, 'dorian'],
  [/^phr(?:yg(?:ian)?)?$/u, 'phrygian'],
  [/^lyd(?:ian)?$/u, 'lydian'],
  [/^mix(?:o(?:lydian)?)?$/u, 'mixolydian'],
  [/^loc(?:rian)?$/u, 'locrian']
]

const MOST_SIGNS = 7

export const keyOf = (tonic: NoteName, mode: Mode): Key => ({
  tonic,
  mode,
  fifths: fifthsOfNote(tonic) + MODE_FIFTHS[mode]
})

/** Reads `G minor`, `Bb`, `F# m`, `D dorian`, `E♭ maj`. A fault is a sentence for the person who typed it. */
export function readKey(text: string): Result<Key, { message: string }> {
  const none = err({ message: 'A key is a note and a mode, such as G minor or B♭ major' })
  if (text.length > MAX_KEY_TEXT) return none
  const match = /^\s*([A-Ga-g](?:[ -]?(?:flat|sharp)|##|bb|[#b♯♭]|))\s*(.*?)\s*$/iu.exec(text)
  const tonic = readNoteName(match?.[1] ?? '')
  if (!match || !tonic) return none
  const typed = match[2] ?? ''
  // `M` and `m` differ; longer words may be written either way.
  const word = typed.length > 1 ? typed.toLowerCase() : typed
  const mode = MODE_WORDS.find(([pattern]) => pattern.test(word))?.[1]
  if (!mode) return none
  const key = keyOf(tonic, mode)
  if (Math.abs(key.fifths) > MOST_SIGNS) {
    const easier = keyOf(noteAtFifths(fifthsOfNote(tonic) - 12 * Math.sign(key.fifths)), mode)
    return err({ message: `${keyText(key)} has more than seven signs; write ${keyText(easier)}` })
  }
  return ok(key)
}

/** `G minor`, `B♭ major`. */
export const keyText = ({ tonic, mode }: Key): string => `${noteText(tonic)} ${mode}`

/** `B flat major`: for screen readers. */
export const keyWords = ({ tonic, mode }: Key): string => `${noteWords(tonic)} ${mode}`

/**
 * The name of a pitch class in a key: the five notes on the flat side of the tonic and the six on its sharp side
 * (lowered second, third, sixth and seventh, raised fourth), so that minor keeps its raised sixth and seventh.
 */
export function spellInKey(pitchClass: PitchClass, key: Key): NoteName {
  const lowest = fifthsOfNote(key.tonic) - 5
  // Seven is its own inverse modulo twelve: a pitch class lies at seven times its number on the line of fifths.
  return noteAtFifths(lowest + modulo(pitchClass * 7 - lowest, 12))
}

/** The key moved by semitones, with the spelling that has fewer signs (flats when both have six). */
export function transposeKey(key: Key, semitones: number): Key {
  const shift = fifthsShift(key.fifths, semitones)
  return { ...key, tonic: noteAtFifths(fifthsOfNote(key.tonic) + shift), fifths: key.fifths + shift }
}

/**
 * Steps on the line of fifths that move music with this signature by semitones and end on −6 to 5 signs.
 * Whole octaves move nothing, whatever the signature.
 */
export function fifthsShift(signatureFifths: number, semitones: number): number {
  const steps = modulo(pitchClassAtFifths(semitones), 12)
  if (steps === 0) return 0
  return modulo(signatureFifths + steps + 6, 12) - 6 - signatureFifths
}
