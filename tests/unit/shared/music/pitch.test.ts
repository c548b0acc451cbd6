import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  fifthsOfNote,
  noteAtFifths,
  noteText,
  pitchClassAtFifths,
  pitchClassOf,
  readNoteName
} from '@shared/music/pitch'

describe('note names', () => {
  it('stand on the line of fifths in the order of the signatures: sharps F C G D A E B, flats B E A D G C F (Open Music Theory, Key signatures)', () => {
    expect([6, 7, 8, 9, 10, 11, 12].map((fifths) => noteText(noteAtFifths(fifths)))).toEqual([
      'F♯',
      'C♯',
      'G♯',
      'D♯',
      'A♯',
      'E♯',
      'B♯'
    ])
    expect([-2, -3, -4, -5, -6, -7, -8].map((fifths) => noteText(noteAtFifths(fifths)))).toEqual([
      'B♭',
      'E♭',
      'A♭',
      'D♭',
      'G♭',
      'C♭',
      'F♭'
    ])
  })

  it('come back from their place and from their text, with the pitch class of both', () => {
    fc.assert(
      fc.property(fc.integer({ min: -15, max: 19 }), (fifths) => {
        const name = noteAtFifths(fifths)
        expect(fifthsOfNote(name)).toBe(fifths)
        expect(pitchClassOf(name)).toBe(pitchClassAtFifths(fifths))
        expect(readNoteName(noteText(name))).toEqual(name)
      })
    )
  })

  it.each(['', 'H', 'Cbbb', 'C7', 'CC'])('are not found in “%s”', (text) => {
    expect(readNoteName(text)).toBeUndefined()
  })
})
