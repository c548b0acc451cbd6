// Chords as they are said aloud, for screen readers.
import type { Chord } from '@shared/music/chord'
import { chordAnatomy, type Alteration, type ChordAnatomy } from '@shared/music/chord-anatomy'
import { noteFromText, noteWords } from '@shared/music/pitch'

const NUMBER_WORDS: Record<number, string> = {
  3: 'third',
  4: 'four',
  5: 'five',
  6: 'six',
  7: 'seventh',
  9: 'nine',
  11: 'eleven',
  13: 'thirteen'
}
const FIGURE_WORDS: Record<number, string> = {
  5: 'power chord',
  6: 'sixth',
  7: 'seventh',
  9: 'ninth',
  11: 'eleventh',
  13: 'thirteenth',
  69: 'six nine'
}

function stemWords({ stem, seventh, figure, sus, bare, alt }: ChordAnatomy): string {
  const figureWord = FIGURE_WORDS[figure] ?? ''
  if (bare) return 'bass note alone'
  if (figure === 5) return figureWord
  if (alt) return 'altered'
  if (stem === 'half-diminished') return `minor ${figureWord}, flat five`
  const size = seventh === 'major' ? 'major' : ''
  const third = stem === 'major' ? (figure === 0 && sus.length === 0 ? 'major' : '') : stem
  return [third, size, figureWord].filter(Boolean).join(' ')
}

const susWords = ({ sus }: ChordAnatomy): string[] =>
  sus.map((degree) => `suspended ${degree === '2' ? 'second' : 'fourth'}`)

const alterationWords = ({ degree, alter }: Alteration): string =>
  `${alter < 0 ? 'flat' : 'sharp'} ${NUMBER_WORDS[degree] ?? degree}`

/** A chord as it is said: `E minor seventh, flat five`, `B flat seventh, sharp nine, over D`, `no chord`. */
export function chordWords(chord: Chord): string {
  if (chord.noChord) return 'no chord'
  const anatomy = chordAnatomy(chord)
  const words = [
    [noteWords(noteFromText(chord.rootName)), stemWords(anatomy), ...susWords(anatomy)].filter(Boolean).join(' '),
    ...anatomy.alterations.map(alterationWords),
    ...(anatomy.addsMajorSeventh ? ['added major seventh'] : []),
    ...anatomy.adds.map((degree) => `added ${NUMBER_WORDS[degree] ?? degree}`),
    ...anatomy.omits.map((degree) => `no ${degree === 3 ? 'third' : 'fifth'}`),
    ...(chord.bassName === null ? [] : [`over ${noteWords(noteFromText(chord.bassName))}`])
  ]
  return words.join(', ')
}
