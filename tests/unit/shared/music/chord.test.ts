import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { MAX_CHORD_TEXT, readChord, type SoundingChord } from '@shared/music/chord'

const sounding = (text: string): SoundingChord => {
  const read = readChord(text)
  if (!read.ok || read.value.noChord) throw new Error(`${text} is not read as a sounding chord`)
  return read.value
}

// kind-value and degree-alter of MusicXML 4.0 (W3C, schema/musicxml.xsd), restated.
const MUSICXML: [string, string, number[]][] = [
  ['major', 'C', [0, 4, 7]],
  ['minor', 'Cm', [0, 3, 7]],
  ['augmented', 'C+', [0, 4, 8]],
  ['diminished', 'Cdim', [0, 3, 6]],
  ['dominant', 'C7', [0, 4, 7, 10]],
  ['major-seventh', 'Cmaj7', [0, 4, 7, 11]],
  ['minor-seventh', 'Cm7', [0, 3, 7, 10]],
  ['diminished-seventh', 'Cdim7', [0, 3, 6, 9]],
  ['augmented-seventh', 'C+7', [0, 4, 8, 10]],
  ['half-diminished', 'Cø', [0, 3, 6, 10]],
  ['major-minor', 'Cm(maj7)', [0, 3, 7, 11]],
  ['major-sixth', 'C6', [0, 4, 7, 9]],
  ['minor-sixth', 'Cm6', [0, 3, 7, 9]],
  ['dominant-ninth', 'C9', [0, 2, 4, 7, 10]],
  ['major-ninth', 'Cmaj9', [0, 2, 4, 7, 11]],
  ['minor-ninth', 'Cm9', [0, 2, 3, 7, 10]],
  ['suspended-second', 'Csus2', [0, 2, 7]],
  ['suspended-fourth', 'Csus4', [0, 5, 7]],
  ['power', 'C5', [0, 7]],
  ['dominant with added degree 9 altered by -1', 'C7b9', [0, 1, 4, 7, 10]],
  ['minor-seventh with degree 5 altered by -1', 'Cm7b5', [0, 3, 6, 10]]
]

// Degree lists of Harte, Sandler, Abdallah, Gómez, Symbolic representation of musical chords, ISMIR 2005.
const HARTE: [string, string, number[]][] = [
  ['hdim7', 'Bø7', [0, 3, 6, 10]],
  ['minmaj7', 'DmM7', [0, 3, 7, 11]],
  ['maj6', 'F6', [0, 4, 7, 9]],
  ['min9', 'Am9', [0, 2, 3, 7, 10]]
]

describe('readChord', () => {
  it.each(MUSICXML)('reads the pitch classes of MusicXML kind %s from %s', (_, text, pcs) => {
    expect(sounding(text).pcs).toEqual(pcs)
  })

  it.each(HARTE)('reads the degrees of shorthand %s from %s', (_, text, pcs) => {
    expect(sounding(text).pcs).toEqual(pcs)
  })

  it('reads a slash and a letter as the bass: D♯dim/F♯ is a diminished triad over its third (Open Music Theory, Lead-sheet symbols)', () => {
    expect(sounding('D#dim/F#')).toMatchObject({
      root: 3,
      rootName: 'D♯',
      bass: 6,
      bassName: 'F♯',
      pcs: [0, 3, 6],
      kind: 'diminished'
    })
  })

  // Common practice, no source: hands that musicians write in.
  it.each([
    ['half-diminished', ['Em7b5', 'E-7(b5)', 'Eø', 'EØ7', 'Eh7', 'E%7', 'E half-diminished', 'em7♭5', 'Em7-5', 'E∅']],
    ['minor', ['Em7', 'E-7', 'E−7', 'Emin7', 'Emi7', 'E minor 7', 'EMIN7', 'Em⁷', '(Em7)']],
    ['major', ['Emaj7', 'EΔ', 'E△7', 'E∆7', 'E^7', 'EM7', 'Ej7', 'E7M', 'E Maj 7', 'EMA7']],
    ['dominant', ['E7#9', 'E7(+9)', 'E7+9', 'E7♯9', 'E79#', 'E7/#9', 'E7[#9]', 'Edom7#9', 'E7 sharp 9']],
    ['sus', ['E7sus4', 'E7sus', 'Esus7', 'E7(sus)', 'E7 sus 4', 'E7SUS']],
    ['minor', ['Em(maj7)', 'E-Δ7', 'Em/maj7', 'Em#7', 'Em+7', 'EmM7', 'E-j7', 'Em7M', 'E minor major 7']]
  ])('reads one %s chord from every hand', (kind, texts) => {
    const chords = texts.map(sounding)
    expect(chords.map((chord) => chord.kind)).toEqual(texts.map(() => kind))
    expect(new Set(chords.map((chord) => chord.pcs.join())).size).toBe(1)
    expect(new Set(chords.map((chord) => chord.rootName))).toEqual(new Set(['E']))
  })

  it.each([
    ['A7-9', [0, 1, 4, 7, 10]],
    ['A-9', [0, 2, 3, 7, 10]],
    ['A7+9', [0, 3, 4, 7, 10]],
    ['A+9', [0, 2, 4, 8, 10]],
    ['Am-5', [0, 3, 6]],
    ['A/9', [0, 2, 4, 7]],
    ['A7/9', [0, 2, 4, 7, 10]],
    ['A°9', [0, 2, 3, 6, 9]]
  ])('tells altered degrees, added ones and qualities apart in %s', (text, pcs) => {
    expect(sounding(text).pcs).toEqual(pcs)
  })

  it.each(['C6/9', 'C69', 'C6(9)', 'C6 add9'])(
    'takes the slash and brackets of %s for figures, not for a bass',
    (text) => {
      expect(sounding(text)).toMatchObject({ bass: null, pcs: [0, 2, 4, 7, 9] })
      expect(sounding(`${text}/E`)).toMatchObject({ bass: 4, pcs: [0, 2, 4, 7, 9] })
    }
  )

  it.each([
    ['major', 'C6'],
    ['minor', 'Cm6'],
    ['dominant', 'C13b9'],
    ['half-diminished', 'Cø9'],
    ['diminished', 'C°7'],
    ['augmented', 'Cmaj7#5'],
    ['sus', 'C11'],
    ['power', 'C(no3)'],
    ['altered', 'C7alt']
  ])('calls %s what is written %s', (kind, text) => {
    expect(sounding(text).kind).toBe(kind)
  })

  it.each([
    ['Bbb7', 9, 'B♭♭'],
    ['F##m', 7, 'F♯♯'],
    ['Cb', 11, 'C♭'],
    ['B flat 7', 10, 'B♭'],
    ['bbm7', 10, 'B♭']
  ])('reads the root of %s', (text, root, rootName) => {
    expect(sounding(text)).toMatchObject({ root, rootName })
  })

  it.each(['N.C.', 'NC', 'n.c.', 'NC.', 'N/C', 'no chord', 'N'])('reads %s as no chord', (text) => {
    expect(readChord(text)).toEqual({ ok: true, value: { noChord: true } })
  })

  it.each([
    '',
    ' ',
    'hello',
    'Xm7',
    '7',
    'b9',
    'do',
    'a',
    'H7',
    'C7b',
    'Am7b',
    '%',
    '/',
    'C/',
    'C/H',
    'Cm5',
    'C77',
    'C8',
    'Dm7 G7'
  ])('refuses “%s” with a sentence', (text) => {
    const read = readChord(text)
    expect(read.ok ? read.value : read.error.message).toEqual(expect.stringMatching(/\w{3}/))
  })

  it('never throws, and every pitch class it gives is relative to the root and sorted', () => {
    const pieces = [
      'C',
      'b',
      '#',
      'm',
      'M',
      'maj',
      '7',
      '9',
      '11',
      '13',
      '-',
      '+',
      '(',
      ')',
      ',',
      '/',
      'sus',
      'add',
      'no',
      'Δ',
      'ø',
      ' ',
      '5',
      'alt'
    ]
    const symbols = fc.oneof(
      fc.string({ unit: 'binary' }),
      fc.array(fc.constantFrom(...pieces)).map((some) => `C${some.join('')}`)
    )
    fc.assert(
      fc.property(symbols, (text) => {
        const read = readChord(text)
        if (!read.ok) {
          expect(read.error.message).not.toBe('')
          return
        }
        if (read.value.noChord) return
        expect(read.value.pcs[0]).toBe(0)
        expect(read.value.pcs).toEqual([...new Set(read.value.pcs)].sort((a, b) => a - b))
        expect(read.value.pcs.every((pc) => pc >= 0 && pc < 12)).toBe(true)
      }),
      { numRuns: 400 }
    )
  })

  it('looks at no more of a text than a symbol can have', () => {
    expect(readChord(`C${' '.repeat(MAX_CHORD_TEXT - 2)}7`).ok).toBe(true)
    expect(readChord(`C${' '.repeat(MAX_CHORD_TEXT - 1)}7`).ok).toBe(false)
    for (const hostile of ['C'.padEnd(100_000, '7b9'), '('.repeat(100_000), `C${'/'.repeat(100_000)}`]) {
      const read = readChord(hostile)
      expect(read.ok ? '' : read.error.message.length).toBeLessThan(200)
    }
  })
})
