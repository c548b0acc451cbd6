import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readChord, type Chord } from '@shared/music/chord'
import { chordText, typesetChord, type ChordStyle } from '@shared/music/chord-typeset'
import { soundingChord } from './arbitraries'

const style: fc.Arbitrary<ChordStyle> = fc.record({
  majorSeventh: fc.constantFrom('maj7', 'triangle'),
  minor: fc.constantFrom('m', 'minus'),
  halfDiminished: fc.constantFrom('ø', 'm7♭5'),
  diminished: fc.constantFrom('°', 'dim')
})

const signs: ChordStyle = { majorSeventh: 'triangle', minor: 'minus', halfDiminished: 'ø', diminished: '°' }
const letters: ChordStyle = { majorSeventh: 'maj7', minor: 'm', halfDiminished: 'm7♭5', diminished: 'dim' }

const chord = (text: string): Chord => {
  const read = readChord(text)
  if (!read.ok) throw new Error(read.error.message)
  return read.value
}

describe('typesetChord', () => {
  it('sets every chord in every hand so that it reads back to the same notes and kind', () => {
    fc.assert(
      fc.property(soundingChord, style, (meant, hand) => {
        const set = chordText(meant, hand)
        const { root, bass, pcs, kind } = meant
        expect(readChord(set), set).toMatchObject({ ok: true, value: { root, bass, pcs, kind } })
      }),
      { numRuns: 500 }
    )
  })

  // Common practice, no source.
  it.each([
    ['Ebmaj7', 'E♭△', 'E♭maj7'],
    ['F#m7', 'F♯−7', 'F♯m7'],
    ['Em7b5', 'Eø', 'Em7♭5'],
    ['Bdim7', 'B°7', 'Bdim7'],
    ['Cm(maj7)', 'C−△', 'Cm(maj7)'],
    ['Ab7b9#11/C', 'A♭7(♭9,♯11)/C', 'A♭7(♭9,♯11)/C'],
    ['C(b5)', 'C(♭5)', 'C(♭5)'],
    ['D9sus', 'D9sus4', 'D9sus4'],
    ['NC', 'N.C.', 'N.C.']
  ])('sets %s as %s in signs and %s in letters', (typed, inSigns, inLetters) => {
    expect(chordText(chord(typed), signs)).toBe(inSigns)
    expect(chordText(chord(typed), letters)).toBe(inLetters)
  })

  it('keeps root, accidental, quality, raised degrees and bass apart, and marks the triangle for the music font', () => {
    expect(typesetChord(chord('Abmaj9#11/Gb'), signs)).toEqual({
      noChord: false,
      root: 'A',
      accidental: '♭',
      quality: [
        { kind: 'triangle', text: '△' },
        { kind: 'text', text: '9' }
      ],
      raised: ['♯11'],
      bass: { letter: 'G', accidental: '♭' }
    })
  })
})
