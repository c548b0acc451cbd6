// Note names and pitch classes. Names are reckoned on the line of fifths (… B♭ −2, F −1, C 0, G 1 …), where a key
// signature is a place and a transposition is a step, so that spelling is plain addition.
import type { PitchClass } from '@shared/units'

/** A note name without octave: letter and sharps (+) or flats (−). */
export interface NoteName {
  letter: string
  alter: number
}

const LETTERS_BY_FIFTHS = 'FCGDAEB'
const ACCIDENTALS: Record<number, string> = { [-2]: '♭♭', [-1]: '♭', 0: '', 1: '♯', 2: '♯♯' }

export const modulo = (value: number, by: number): number => ((value % by) + by) % by

/** Place of a name on the line of fifths, C = 0. */
export const fifthsOfNote = ({ letter, alter }: NoteName): number => LETTERS_BY_FIFTHS.indexOf(letter) - 1 + 7 * alter

/** Name at a place on the line of fifths (any whole number). */
export const noteAtFifths = (fifths: number): NoteName => ({
  letter: LETTERS_BY_FIFTHS[modulo(fifths + 1, 7)] ?? 'C',
  alter: Math.floor((fifths + 1) / 7)
})

/** 0-11, C = 0: seven semitones a fifth. */
export const pitchClassAtFifths = (fifths: number): PitchClass => modulo(fifths * 7, 12)

export const pitchClassOf = (name: NoteName): PitchClass => pitchClassAtFifths(fifthsOfNote(name))

/** `♭♭`, `♭`, nothing, `♯` or `♯♯`; longer rows for more than two. */
export const accidentalText = (alter: number): string =>
  ACCIDENTALS[alter] ?? (alter < 0 ? '♭' : '♯').repeat(Math.abs(alter))

/** `E♭`, `F♯`, `C`. */
export const noteText = ({ letter, alter }: NoteName): string => letter + accidentalText(alter)

/** `E flat`, `F sharp`, `C`: for screen readers. */
export const noteWords = ({ letter, alter }: NoteName): string =>
  letter + (alter < 0 ? ' flat' : ' sharp').repeat(Math.abs(alter))

/**
 * Reads a bare note name as typed: `Eb`, `F#`, `B♭`, `A flat`, `c`. Two accidentals at most.
 * Undefined when it is none.
 */
export function readNoteName(text: string): NoteName | undefined {
  if (text.length > 16) return undefined
  const match = /^([A-Ga-g])[ -]?(##|bb|#|b|♯♯|♭♭|♯|♭|𝄪|𝄫|sharp|flat|)$/iu.exec(text.trim())
  const letter = match?.[1]?.toUpperCase()
  if (!match || !letter) return undefined
  const sign = (match[2] ?? '').toLowerCase()
  if (sign === '𝄪' || sign === '##' || sign === '♯♯') return { letter, alter: 2 }
  if (sign === '𝄫' || sign === 'bb' || sign === '♭♭') return { letter, alter: -2 }
  if (sign === '#' || sign === '♯' || sign === 'sharp') return { letter, alter: 1 }
  if (sign === 'b' || sign === '♭' || sign === 'flat') return { letter, alter: -1 }
  return { letter, alter: 0 }
}

/** Reads a name this module wrote (`E♭`), C when it did not. */
export const noteFromText = (text: string): NoteName => readNoteName(text) ?? { letter: 'C', alter: 0 }
