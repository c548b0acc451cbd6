import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readChord } from '@shared/music/chord'
import { chordWords } from '@shared/music/chord-words'
import { soundingChord } from './arbitraries'

describe('chordWords', () => {
  // Common practice, no source.
  it.each([
    ['C', 'C major'],
    ['Em7b5', 'E minor seventh, flat five'],
    ['Eø', 'E minor seventh, flat five'],
    ['Bb7#9/D', 'B flat seventh, sharp nine, over D'],
    ['F#m(maj7)', 'F sharp minor major seventh'],
    ['C6/9', 'C six nine'],
    ['Gsus', 'G suspended fourth'],
    ['G7sus', 'G seventh suspended fourth'],
    ['A7alt', 'A altered'],
    ['D5', 'D power chord'],
    ['Bdim7', 'B diminished seventh'],
    ['Cadd9', 'C major, added nine'],
    ['N.C.', 'no chord']
  ])('says %s as “%s”', (text, words) => {
    const read = readChord(text)
    expect(read.ok && chordWords(read.value)).toBe(words)
  })

  it('says every chord without a sign a voice would stumble over', () => {
    fc.assert(
      fc.property(soundingChord, (chord) => {
        expect(chordWords(chord)).toMatch(/^[A-G][a-z]?[A-Za-z, ]+$/)
      })
    )
  })
})
