import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readChord } from '@shared/music/chord'
import {
  INSTRUMENT_SEMITONES,
  transposeBarText,
  transposeChart,
  transposeChord,
  transposeChordText,
  transposition
} from '@shared/music/transpose'
import { COMMON_METER } from '@shared/timing/meter'
import { soundingChord, symbol } from './arbitraries'

const semitones = fc.integer({ min: -24, max: 24 })
const signature = fc.integer({ min: -7, max: 7 })

describe('transposeChord', () => {
  it('changes nothing by twelve steps', () => {
    fc.assert(
      fc.property(soundingChord, signature, (chord, fifths) => {
        expect(transposeChord(chord, transposition(12, fifths))).toEqual(chord)
      })
    )
  })

  it('moves root and bass alike, keeps the quality, and comes back', () => {
    fc.assert(
      fc.property(soundingChord, semitones, signature, (chord, steps, fifths) => {
        const up = transposition(steps, fifths)
        const moved = transposeChord(chord, up)
        const back = transposeChord(moved, transposition(-steps, fifths + up.fifths))
        if (moved.noChord || back.noChord) throw new Error('a chord stays one')
        expect(moved.root).toBe((chord.root + steps + 48) % 12)
        if (chord.bass !== null) expect(moved.bass).toBe((chord.bass + steps + 48) % 12)
        expect([moved.pcs, moved.kind]).toEqual([chord.pcs, chord.kind])
        expect([back.root, back.bass]).toEqual([chord.root, chord.bass])
      })
    )
  })
})

describe('transposeChordText', () => {
  it('writes what readChord reads as the moved chord', () => {
    fc.assert(
      fc.property(symbol, semitones, signature, (text, steps, fifths) => {
        const by = transposition(steps, fifths)
        const [read, moved] = [readChord(text), transposeChordText(text, by)]
        if (!read.ok || read.value.noChord || !moved.ok) throw new Error(`${text} should be read`)
        const { pcs, kind } = read.value
        const meant = transposeChord(read.value, by)
        if (meant.noChord) throw new Error('a chord stays one')
        expect(readChord(moved.value), moved.value).toMatchObject({
          ok: true,
          value: { root: meant.root, bass: meant.bass, pcs, kind }
        })
      })
    )
  })

  it.each([
    ['Ebm7(b5)/A', 2, -6, 'Fm7(b5)/B'],
    ['C b5', 1, 0, 'D♭(b5)'],
    ['Fb7', 2, -4, 'G♭7'],
    ['N.C.', 5, 0, 'N.C.']
  ])('moves %s by %i semitones out of %i signs to %s', (text, steps, fifths, moved) => {
    expect(transposeChordText(text, transposition(steps, fifths))).toEqual({ ok: true, value: moved })
  })
})

describe('transposed parts', () => {
  const chart = {
    key: 'G minor',
    meter: '4/4',
    tempo: null,
    cyclic: true,
    sections: [{ id: 'a', name: 'A', bars: ['Gm7 C7', 'Am7b5 . . D7b9', '%', 'Ebmaj7 F/A', ''] }],
    order: ['a']
  }

  it('are written a whole tone up for B♭ and a major sixth up for E♭ instruments (common practice, no source)', () => {
    const forBFlat = transposeChart(chart, INSTRUMENT_SEMITONES['B♭'])
    expect([forBFlat.key, forBFlat.sections[0]?.bars]).toEqual([
      'A minor',
      ['Am7 D7', 'Bm7b5 . . E7b9', '%', 'Fmaj7 G/B', '']
    ])
    const forEFlat = transposeChart(chart, INSTRUMENT_SEMITONES['E♭'])
    expect([forEFlat.key, forEFlat.sections[0]?.bars]).toEqual([
      'E minor',
      ['Em7 A7', 'F♯m7b5 . . B7b9', '%', 'Cmaj7 D/F♯', '']
    ])
  })

  it('keep blanks, beats and what cannot be read as typed', () => {
    const by = transposition(2)
    expect(transposeBarText('C  maj7  . . G7(b9,  #11)', COMMON_METER, by)).toBe('Dmaj7  . . A7(b9, #11)')
    expect(transposeBarText('hello', COMMON_METER, by)).toBe('hello')
  })
})
