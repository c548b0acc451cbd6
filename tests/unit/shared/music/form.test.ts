import { describe, expect, it } from 'vitest'
import { chordAt, formBars, formLength, formOf, sectionWords } from '@shared/music/form'
import type { ChartBody } from '@shared/music/types'
import { rational } from '@shared/timing/rational'

const bars = (...first: string[]): string[] => Array.from({ length: 8 }, (_, index) => first[index] ?? '%')

const chart: ChartBody = {
  key: 'G minor',
  meter: '4/4',
  tempo: null,
  cyclic: true,
  sections: [
    { id: 'a', name: 'A', bars: bars('Gm7') },
    { id: 'b', name: 'B', bars: bars('', 'Cm7 F7') },
    { id: 'tag', name: 'Tag', bars: ['Gm7'] }
  ],
  order: ['a', 'a', 'b', 'a']
}

describe('formBars', () => {
  it('lays A A B A out in played order and counts sections, bars and the form', () => {
    const played = formBars(chart)
    expect(played).toHaveLength(32)
    expect(formLength(chart)).toBe(32)
    expect(played.map(({ formBar }) => formBar)).toEqual(Array.from({ length: 32 }, (_, index) => index + 1))
    expect(played[9]).toEqual({
      sectionId: 'a',
      sectionName: 'A',
      sectionOccurrence: 2,
      sectionOccurrences: 3,
      barInSection: 2,
      formBar: 10,
      orderIndex: 1,
      text: '%'
    })
  })

  it('leaves out written sections that are not played, and order entries that name none', () => {
    expect(formBars(chart).some(({ sectionId }) => sectionId === 'tag')).toBe(false)
    expect(formLength({ ...chart, order: ['tag', 'gone', 'tag'] })).toBe(2)
    expect(formBars({ ...chart, order: [] })).toEqual([])
  })

  it('names a section by its playing only where it is played more than once', () => {
    const words = [1, 9, 17, 25]
      .map((formBar) => formBars(chart)[formBar - 1])
      .map((bar) => (bar ? sectionWords(bar) : ''))
    expect(words).toEqual(['1st A', '2nd A', 'B', '3rd A'])
  })
})

describe('chordAt', () => {
  const form = formOf(chart)
  const at = (formBar: number, beat = 1) => chordAt(form, formBar, rational(beat))?.text ?? null

  it('resolves repeats and gaps from the bars played before', () => {
    expect([at(1), at(8), at(17), at(18), at(18, 3), at(24, 2), at(24, 4), at(25)]).toEqual([
      'Gm7',
      'Gm7',
      'Gm7',
      'Cm7',
      'F7',
      'Cm7',
      'F7',
      'Gm7'
    ])
  })

  it('finds nothing outside the form', () => {
    expect([at(0), at(33)]).toEqual([null, null])
  })
})
