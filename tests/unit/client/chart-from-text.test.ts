import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { chartDocument } from '@shared/music/chart-document'
import type { ChartBody } from '@shared/music/types'
import { barsFromText, chartFromText, textOfChart } from '@client/features/tunes/chart-from-text'

const ids = () => {
  let count = 0
  return () => `new-${(count += 1)}`
}

const body: ChartBody = {
  ...chartDocument.empty,
  sections: [
    { id: 'a', name: 'A', bars: ['Gm7', '%'] },
    { id: 'b', name: 'B', bars: ['Cm7', 'F7'] }
  ],
  order: ['a', 'a', 'b', 'a']
}

const bars = fc.array(fc.constantFrom('Dm7', 'Em7b5 A7', '%', 'N.C.', '', 'Bb7#11 / / Eb'), {
  minLength: 1,
  maxLength: 12
})
const charts = fc.array(bars, { minLength: 1, maxLength: 5 }).map((list): ChartBody => {
  const sections = list.map((each, i) => ({ id: `s${i}`, name: 'ABCDE'[i] as string, bars: each }))
  return { ...chartDocument.empty, sections, order: sections.map(({ id }) => id) }
})

describe('chartFromText', () => {
  it('changes nothing when the text is left as it was', () => {
    fc.assert(
      fc.property(charts, (chart) => {
        const read = chartFromText(chart, textOfChart(chart), ids())
        expect(read).toEqual({ ok: true, value: { operations: [], body: chart } })
      })
    )
  })

  it('touches only the section that was typed over, so that edits of others merge', () => {
    const read = chartFromText(body, '[A]\n| Gm7 | Eb7 |\n[B]\n| Cm7 | F7 |', ids())
    expect(read.ok && read.value.operations).toEqual([{ kind: 'setBars', sectionId: 'a', bars: ['Gm7', 'Eb7'] }])
  })

  it('takes a section that comes again, whole or by its name alone, as the played order', () => {
    const whole = chartFromText(chartDocument.empty, '[A]\n| C |\n[B]\n| F |\n[A]\n| C |', ids())
    const named = chartFromText(chartDocument.empty, '[A]\n| C |\n[B]\n| F |\n[A]', ids())
    for (const read of [whole, named]) {
      expect(read.ok && read.value.body.sections.map(({ name }) => name)).toEqual(['A', 'B'])
      expect(read.ok && read.value.body.order).toEqual(['new-1', 'new-2', 'new-1'])
    }
  })

  it('keeps the order of sections that stay and plays new ones at the end', () => {
    const read = chartFromText(body, '[A]\n| Gm7 | % |\n[C]\n| D7 |', ids())
    expect(read.ok && read.value.body.order).toEqual(['a', 'a', 'a', 'new-1'])
  })

  it('names every faulty bar', () => {
    const read = chartFromText(body, '| Gm7 | Hx | C | Zz |', ids())
    expect(!read.ok && read.error.map(({ bar }) => bar)).toEqual([2, 4])
  })
})

describe('barsFromText', () => {
  it('refuses a second section', () => {
    expect(barsFromText(body, '| C |\n[B]\n| F |').ok).toBe(false)
    expect(barsFromText(body, '| C | F |')).toEqual({ ok: true, value: ['C', 'F'] })
  })
})
