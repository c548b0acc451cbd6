import fc from 'fast-check'
import { readChord, type SoundingChord } from '@shared/music/chord'

const ROOTS = [
  'C',
  'C#',
  'Db',
  'D',
  'D#',
  'Eb',
  'E',
  'F',
  'F#',
  'Gb',
  'G',
  'G#',
  'Ab',
  'A',
  'A#',
  'Bb',
  'B',
  'Cb',
  'E#',
  'B#',
  'Fb'
]
const BASES = [
  '',
  'm',
  '-',
  'maj7',
  'M7',
  'Δ',
  '7',
  'm7',
  'ø',
  '°',
  '°7',
  'dim',
  '+',
  '6',
  'm6',
  '69',
  '9',
  'maj9',
  'm9',
  '11',
  'm11',
  '13'
]
const MORE = [
  '',
  '',
  'b5',
  '#5',
  'b9',
  '#9',
  '#11',
  'b13',
  '(b9,#11)',
  '(#5,#9)',
  'sus',
  'sus2',
  'alt',
  'add9',
  'add11',
  '(no3)',
  '(no5)',
  '(maj7)'
]

/** Symbols that can be read, over all roots, qualities and basses. */
export const symbol: fc.Arbitrary<string> = fc
  .tuple(
    fc.constantFrom(...ROOTS),
    fc.constantFrom(...BASES),
    fc.constantFrom(...MORE),
    fc.constantFrom('', '', ...ROOTS)
  )
  .map(([root, base, more, bass]) => {
    const closes = base === '' && /^[b#]/.test(more)
    return root + base + (closes ? `(${more})` : more) + (bass === '' ? '' : `/${bass}`)
  })
  .filter((text) => readChord(text).ok)

export const soundingChord: fc.Arbitrary<SoundingChord> = symbol.map((text) => {
  const read = readChord(text)
  if (!read.ok || read.value.noChord) throw new Error(`${text} should sound`)
  return read.value
})
