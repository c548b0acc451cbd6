import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { keyText, keyWords, readKey, spellInKey, transposeKey, type Key } from '@shared/music/key'
import { noteText, pitchClassOf } from '@shared/music/pitch'

const key = (text: string): Key => {
  const read = readKey(text)
  if (!read.ok) throw new Error(read.error.message)
  return read.value
}

const anyKey = fc
  .constantFrom(
    'C',
    'G',
    'D',
    'A',
    'E',
    'B',
    'F#',
    'C#',
    'F',
    'Bb',
    'Eb',
    'Ab',
    'Db',
    'Gb',
    'Cb',
    'G minor',
    'F# minor',
    'D dorian'
  )
  .map(key)

describe('readKey', () => {
  it.each([
    ['G minor', 'G minor', -2],
    ['Gm', 'G minor', -2],
    ['G-', 'G minor', -2],
    ['Bb', 'B♭ major', -2],
    ['F# m', 'F♯ minor', 3],
    ['CM', 'C major', 0],
    ['f sharp Minor', 'F♯ minor', 3],
    ['E phryg', 'E phrygian', 0]
  ])('reads %s as %s with %i signs', (text, name, fifths) => {
    expect(keyText(key(text))).toBe(name)
    expect(key(text).fifths).toBe(fifths)
  })

  it('gives A major three sharps and A♭ major four flats (Open Music Theory, Key signatures)', () => {
    expect([key('A').fifths, key('Ab').fifths]).toEqual([3, -4])
  })

  it('gives the modes on the white keys no signs (Open Music Theory, Collections and scales)', () => {
    const white = ['D dorian', 'E phrygian', 'F lydian', 'G mixolydian', 'A minor', 'B locrian']
    expect(white.map((mode) => key(mode).fifths)).toEqual([0, 0, 0, 0, 0, 0])
  })

  it('refuses what is no key, and names the easier spelling of a key with more than seven signs', () => {
    for (const text of ['', 'H', 'minor', 'C sideways', 'C'.repeat(1000)]) expect(readKey(text).ok).toBe(false)
    expect(readKey('G# major')).toEqual({ ok: false, error: { message: expect.stringContaining('A♭ major') } })
  })

  it('is said without signs', () => {
    expect(keyWords(key('Bb minor'))).toBe('B flat minor')
  })
})

describe('spellInKey', () => {
  const spelled = (name: string) => Array.from({ length: 12 }, (_, pc) => noteText(spellInKey(pc, key(name)))).join(' ')

  it('spells the twelve notes around a major and a minor tonic', () => {
    // Common practice, no source: lowered 2 3 6 7, raised 4; in minor the raised 6 and 7 as well.
    expect(spelled('C')).toBe('C D♭ D E♭ E F F♯ G A♭ A B♭ B')
    expect(spelled('G minor')).toBe('C C♯ D E♭ E F F♯ G A♭ A B♭ B')
  })

  it('gives a name of that pitch class in every key', () => {
    fc.assert(
      fc.property(anyKey, fc.integer({ min: 0, max: 11 }), (some, pc) => {
        expect(pitchClassOf(spellInKey(pc, some))).toBe(pc)
      })
    )
  })
})

describe('transposeKey', () => {
  it('lands on the right pitch class with at most six signs, and does nothing for whole octaves', () => {
    fc.assert(
      fc.property(anyKey, fc.integer({ min: -36, max: 36 }), (from, semitones) => {
        const to = transposeKey(from, semitones)
        expect(pitchClassOf(to.tonic)).toBe((((pitchClassOf(from.tonic) + semitones) % 12) + 12) % 12)
        if (semitones % 12 === 0) expect(to).toEqual(from)
        else expect(Math.abs(to.fifths)).toBeLessThanOrEqual(6)
      })
    )
  })
})
