import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { chartText, MAX_CHART_TEXT, parseChartText, sectionsText } from '@shared/music/chart-text'
import { COMMON_METER } from '@shared/timing/meter'

const parsed = (text: string) => {
  const read = parseChartText(text, COMMON_METER)
  if (!read.ok) throw new Error(read.error.map(({ message }) => message).join('; '))
  return read.value
}
const faults = (text: string) => {
  const read = parseChartText(text, COMMON_METER)
  return read.ok ? [] : read.error
}

describe('parseChartText', () => {
  it('reads bars between bar lines', () => {
    expect(parsed('| Dm7 | Em7b5 A7 | % | N.C. |').bars).toEqual(['Dm7', 'Em7b5 A7', '%', 'N.C.'])
    expect(parsed('Dm7 | | G7 ||').bars).toEqual(['Dm7', '', 'G7'])
  })

  it('takes headers for sections and lines for rows', () => {
    expect(parsed('A:\n| Dm7 | G7 |\n| Cmaj7 | % |]\n\n[Bridge] | F#m7b5 | B7 |').sections).toEqual([
      { name: 'A', bars: ['Dm7', 'G7', 'Cmaj7', '%'] },
      { name: 'Bridge', bars: ['F#m7b5', 'B7'] }
    ])
  })

  it('names bars before the first header after a letter', () => {
    expect(parsed('Dm7 | G7\nB: C').sections.map(({ name }) => name)).toEqual(['A', 'B'])
  })

  it('names every faulty bar, counted through the text, and the reason', () => {
    const found = faults('A: | Dm7 | hello |\nB: | C . G7 | % |')
    expect(found.map(({ bar }) => bar)).toEqual([2, 3])
    expect(found[0]?.message).toMatch(/^Bar 2: “hello”/)
    expect(found[1]?.message).toMatch(/^Bar 3: 3 beats are written/)
  })

  it('says so where repeat signs stand', () => {
    expect(faults('|: Dm7 | G7 :|').map(({ bar }) => bar)).toEqual([1, 2])
  })

  it.each(['', ' \n ', '|', 'A:'])('refuses “%s”, which holds no bar', (text) => {
    expect(faults(text)).toEqual([{ bar: 0, message: 'No bar is written' }])
  })

  it('gives up on text that is too long or no chart at all', () => {
    expect(faults('C|'.repeat(MAX_CHART_TEXT)).map(({ bar }) => bar)).toEqual([0])
    expect(faults('x | '.repeat(500)).length).toBeLessThan(30)
    expect(faults('C | '.repeat(1500))).toEqual([{ bar: 0, message: 'A chart holds at most 1000 bars' }])
  })

  it('reads back what chartText and sectionsText write', () => {
    const bar = fc.constantFrom('Dm7', 'Em7b5 A7', '%', 'N.C.', 'Dm7 . . G7', '')
    const bars = fc.array(bar, { minLength: 1, maxLength: 20 })
    fc.assert(
      fc.property(bars, fc.integer({ min: 1, max: 8 }), (some, perRow) => {
        expect(parsed(chartText(some, perRow)).bars).toEqual(some)
      })
    )
    const sections = fc.array(fc.record({ name: fc.constantFrom('A', 'B', 'Bridge', 'Intro 2'), bars }), {
      minLength: 1,
      maxLength: 4
    })
    fc.assert(
      fc.property(sections, (some) => {
        expect(parsed(sectionsText(some)).sections).toEqual(some)
      })
    )
  })
})
