// Chords as they are set on the chart, in the reader's own handwriting.
import type { Chord, SoundingChord } from '@shared/music/chord'
import { chordAnatomy, type Alteration, type ChordAnatomy } from '@shared/music/chord-anatomy'
import { accidentalText, noteFromText } from '@shared/music/pitch'

/** How a reader likes chords written. */
export interface ChordStyle {
  majorSeventh: 'maj7' | 'triangle'
  minor: 'm' | 'minus'
  halfDiminished: 'ø' | 'm7♭5'
  diminished: '°' | 'dim'
}

export const DEFAULT_CHORD_STYLE: ChordStyle = {
  majorSeventh: 'maj7',
  minor: 'm',
  halfDiminished: 'ø',
  diminished: '°'
}

/** A run of the quality. `triangle` is drawn from the music font (SMuFL csymMajorSeventh, U+E873); its text is only a stand-in. */
export interface QualityPiece {
  kind: 'text' | 'triangle'
  text: string
}

export interface TypesetNote {
  letter: string
  /** `♭`, `♯`, doubled, or empty. */
  accidental: string
}

/** A chord symbol in its parts, in the order they are set; `noChord` has only its text as root letter. */
export interface TypesetChord {
  noChord: boolean
  root: string
  accidental: string
  quality: QualityPiece[]
  /** Set above the line, in order: `♭5`, `♯9`, `add9`, `sus4`, `no3`, `alt`. */
  raised: string[]
  bass: TypesetNote | null
}

const ALTER_SIGNS: Record<number, string> = { [-1]: '♭', 1: '♯' }
const alterationText = ({ degree, alter }: Alteration): string => `${ALTER_SIGNS[alter] ?? ''}${degree}`

const text = (some: string): QualityPiece => ({ kind: 'text', text: some })
const triangle: QualityPiece = { kind: 'triangle', text: '△' }

function majorPieces(figure: number, style: ChordStyle): QualityPiece[] {
  if (style.majorSeventh === 'maj7') return [text(`maj${figure}`)]
  // The triangle alone already says the seventh.
  return figure === 7 ? [triangle] : [triangle, text(String(figure))]
}

function figureText(figure: ChordAnatomy['figure']): string {
  return figure === 0 ? '' : figure === 69 ? '6/9' : String(figure)
}

interface Quality {
  pieces: QualityPiece[]
  /** Alterations that the style writes out instead of a sign. */
  spelled: Alteration[]
}

function qualityOf(anatomy: ChordAnatomy, style: ChordStyle): Quality {
  const { stem, seventh, figure } = anatomy
  const minor = text(style.minor === 'm' ? 'm' : '−')
  const diminished = text(style.diminished)
  const plain = (pieces: QualityPiece[]): Quality => ({
    pieces: pieces.filter((piece) => piece.text !== ''),
    spelled: []
  })
  if (anatomy.bare) return plain([text(' bass')])
  if (stem === 'half-diminished')
    return style.halfDiminished === 'ø'
      ? plain([text(figure === 7 ? 'ø' : `ø${figure}`)])
      : { pieces: [minor, text(String(figure))], spelled: [{ degree: 5, alter: -1 }] }
  const tower =
    seventh === 'major'
      ? majorPieces(figure, style)
      : seventh === 'diminished'
        ? [text('7')]
        : [text(figureText(figure))]
  if (stem === 'diminished') return plain([diminished, ...tower])
  if (stem === 'augmented') return plain([text('+'), ...tower])
  if (stem === 'minor' && seventh === 'major' && style.majorSeventh === 'maj7')
    return plain([minor, text('('), ...tower, text(')')])
  return plain(stem === 'minor' ? [minor, ...tower] : tower)
}

const bassOf = (chord: SoundingChord): TypesetNote | null => {
  if (chord.bassName === null) return null
  const { letter, alter } = noteFromText(chord.bassName)
  return { letter, accidental: accidentalText(alter) }
}

/** Sets a chord in a reader's handwriting. */
export function typesetChord(chord: Chord, style: ChordStyle = DEFAULT_CHORD_STYLE): TypesetChord {
  if (chord.noChord) return { noChord: true, root: 'N.C.', accidental: '', quality: [], raised: [], bass: null }
  const anatomy = chordAnatomy(chord)
  const { pieces, spelled } = qualityOf(anatomy, style)
  const { letter, alter } = noteFromText(chord.rootName)
  return {
    noChord: false,
    root: letter,
    accidental: accidentalText(alter),
    quality: pieces,
    raised: [
      ...(anatomy.alt ? ['alt'] : []),
      ...(anatomy.sus.length > 0 ? [`sus${anatomy.sus.join('')}`] : []),
      ...[...spelled, ...anatomy.alterations].map(alterationText),
      ...(anatomy.addsMajorSeventh ? ['addmaj7'] : []),
      ...anatomy.adds.map((degree) => `add${degree}`),
      ...anatomy.omits.map((degree) => `no${degree}`)
    ],
    bass: bassOf(chord)
  }
}

/** A set chord as one line of text, for places that hold nothing but text; readable back by `readChord`. */
export function typesetText(set: TypesetChord): string {
  const quality = set.quality.map((piece) => piece.text).join('')
  // Right behind the root a flat would be taken for the root's own.
  const bracketed = set.raised.length > 1 || (quality === '' && /^[♭♯]/u.test(set.raised[0] ?? ''))
  const raised = bracketed ? `(${set.raised.join(',')})` : set.raised.join('')
  const bass = set.bass ? `/${set.bass.letter}${set.bass.accidental}` : ''
  return set.root + set.accidental + quality + raised + bass
}

/** A chord in a reader's handwriting as one line of text: `Em7b5` -> `Eø`. */
export const chordText = (chord: Chord, style: ChordStyle = DEFAULT_CHORD_STYLE): string =>
  typesetText(typesetChord(chord, style))
