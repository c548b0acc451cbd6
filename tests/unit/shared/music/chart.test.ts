import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { chordInBar, chordsOfBar, MAX_BAR_TEXT, readBar, soundingBars } from '@shared/music/chart'
import { COMMON_METER, readMeter } from '@shared/timing/meter'
import { rational, toNumber } from '@shared/timing/rational'
import type { Meter } from '@shared/timing/types'

const meter = (text: string): Meter => {
  const read = readMeter(text)
  if (!read) throw new Error(`${text} is no meter`)
  return read
}

const placed = (bar: string, inMeter = '4/4'): string => {
  const chords = chordsOfBar(bar, meter(inMeter))
  if (!chords.ok) return chords.error.message
  return chords.value.map(({ text, beat }) => `${text}@${toNumber(beat)}`).join(' ')
}

describe('chordsOfBar', () => {
  it.each([
    ['Dm7', '4/4', 'Dm7@1'],
    ['Em7b5 A7', '4/4', 'Em7b5@1 A7@3'],
    ['C D E', '4/4', 'C@1 D@3 E@4'],
    ['C D', '3/4', 'C@1 D@3'],
    ['C D', '6/8', 'C@1 D@4'],
    ['C D', '12/8', 'C@1 D@7'],
    ['C D', '7/8', 'C@1 D@5'],
    ['C D E F', '2/2', 'C@1 D@1.5 E@2 F@2.5']
  ])('shares the bar %s in %s evenly on its felt beats, the longer first', (bar, inMeter, chords) => {
    expect(placed(bar, inMeter)).toBe(chords)
  })

  it.each([
    ['Dm7 . . G7', '4/4', 'Dm7@1 G7@4'],
    ['Dm7 / / G7', '4/4', 'Dm7@1 G7@4'],
    ['. . Dm7 .', '4/4', 'Dm7@3'],
    ['C . . . . G7', '6/8', 'C@1 G7@6'],
    ['C / / G7', '2/2', 'C@1 G7@2.5']
  ])('puts the chords of %s in %s on the beats that are written out', (bar, inMeter, chords) => {
    expect(placed(bar, inMeter)).toBe(chords)
  })

  it('keeps blanks that belong to a chord', () => {
    expect(placed('C maj7 F7(b9, #11)')).toBe('C maj7@1 F7(b9, #11)@3')
    expect(placed('N.C. G 7')).toBe('N.C.@1 G 7@3')
  })

  it.each(['', '%', '/ / / /', '. .'])('finds no chord written in “%s”', (bar) => {
    expect(placed(bar)).toBe('')
  })

  it.each([
    ['hello', /hello/],
    ['Dm7 . G7', /3 beats are written, a bar of 4\/4 has 4/],
    ['Am7 %', /alone/],
    ['C | G', /bar line/],
    ['C D E F G A B C D', /9 chords are too many/],
    ['C'.repeat(MAX_BAR_TEXT + 1), /characters/],
    ['a '.repeat(50), /More is written/]
  ])('refuses “%s” with the reason', (bar, reason) => {
    expect(placed(bar)).toMatch(reason)
  })

  it('begins chords inside the bar, each after the one before, whatever is typed', () => {
    const word = fc.constantFrom('Dm7', 'G7', 'N.C.', '.', '/', '%', 'x', 'C maj7')
    const meters = fc.constantFrom('4/4', '3/4', '6/8', '7/8', '2/2', '12/8', '1/4')
    fc.assert(
      fc.property(fc.array(word, { maxLength: 9 }), meters, (words, inMeter) => {
        const chords = chordsOfBar(words.join(' '), meter(inMeter))
        if (!chords.ok) return
        const beats = chords.value.map(({ beat }) => toNumber(beat))
        expect(beats).toEqual([...new Set(beats)].sort((a, b) => a - b))
        expect(beats.every((beat) => beat >= 1 && beat < meter(inMeter).upper + 1)).toBe(true)
      })
    )
  })
})

describe('soundingBars', () => {
  const sounds = (bars: string[]): string[] =>
    soundingBars(bars, COMMON_METER).map(({ chords }) =>
      chords.map(({ text, beat, carried }) => `${text}@${toNumber(beat)}${carried ? '…' : ''}`).join(' ')
    )

  it('brings the bar before back at %, and lets the last chord go on in an empty bar', () => {
    expect(sounds(['Dm7 G7', '%', '', '. . C .', '%'])).toEqual([
      'Dm7@1 G7@3',
      'Dm7@1… G7@3…',
      'G7@1…',
      'G7@1… C@3',
      'G7@1… C@3…'
    ])
  })

  it('is silent before the first chord and goes on over what cannot be read', () => {
    expect(sounds(['', '%', '. . C .', 'hello'])).toEqual(['', '', 'C@3', 'C@1…'])
  })

  it('finds the chord of a beat', () => {
    const bars = soundingBars(['. . C G'], COMMON_METER)
    const at = (n: number, d = 1) => (bars[0] ? chordInBar(bars[0], rational(n, d))?.text : undefined)
    expect([at(1), at(5, 2), at(3), at(7, 2), at(4), at(9, 2)]).toEqual([undefined, undefined, 'C', 'C', 'G', 'G'])
  })
})

describe('readBar', () => {
  it('never throws', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary', maxLength: 200 }), (text) => {
        expect(readBar(text, COMMON_METER)).toHaveProperty('ok')
      })
    )
  })
})
