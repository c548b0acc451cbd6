import { describe, expect, it } from 'vitest'
import { commentsByBar, deskModel } from '@client/app/desk/desk-model'
import type { ChartBody } from '@shared/music/types'
import { rational } from '@shared/timing/rational'
import type { BarMapBody } from '@shared/timing/types'
import { meter } from '../../shared/timing/random-bar-map'

/** Bars of two seconds, bar 1 at 0; the form begins with bar 3, after two free bars. */
const bars: BarMapBody = {
  anchors: [1, 2].map((bar) => ({ id: `a${bar}`, sec: (bar - 1) * 2, position: { bar, beat: rational(1) } })),
  meters: [{ bar: 1, meter: meter('4/4') }],
  marks: [{ bar: 3, formBar: 1, newPass: true }]
}
const chart: ChartBody = {
  key: 'C minor',
  meter: '4/4',
  tempo: null,
  cyclic: true,
  sections: [
    { id: 'a', name: 'A', bars: ['Cm7', '%'] },
    { id: 'b', name: 'B', bars: ['Fm7 Bb7', 'Ebmaj7'] }
  ],
  order: ['a', 'b']
}
const model = deskModel({ durationSec: 20, bars, chart })

describe('deskModel', () => {
  it('lays passes out in rows, the free introduction apart and without numbers', () => {
    expect(model.rows.map(({ kind, cells }) => [kind, cells.length])).toEqual([
      ['introduction', 2],
      ['pass', 4],
      ['pass', 4]
    ])
    expect([1, 2, 3, 6, 7].map(model.barLabel)).toEqual(['', '', '1', '4', '1'])
    expect(model.barName(7)).toBe('bar 1, 2nd chorus')
  })

  it('marks where sections begin, in every pass', () => {
    expect(model.sectionMarks).toEqual([
      { bar: 3, name: 'A' },
      { bar: 5, name: 'B' },
      { bar: 7, name: 'A' },
      { bar: 9, name: 'B' }
    ])
  })

  it('shows a chord that only goes on faintly, and chords on their beats', () => {
    expect(model.chordsOf(4).map(({ beat, faint }) => [beat, faint])).toEqual([[1, true]])
    expect(model.chordsOf(5).map(({ beat, faint }) => [beat, faint])).toEqual([
      [1, false],
      [3, false]
    ])
    expect(model.chordsOf(1)).toEqual([])
  })

  it('says a place in words, right again when the bars are counted differently', () => {
    const span = { startSec: 8, endSec: 10 }
    expect(model.placeOf(span).full).toBe('bar 3 · B section, 1st chorus · over Fm7 and B♭7')
    const later = deskModel({
      durationSec: 20,
      bars: { ...bars, marks: [{ bar: 5, formBar: 1, newPass: true }] },
      chart
    })
    expect(later.placeOf(span).full).toBe('bar 1 · A section, 1st chorus · over Cm7')
    expect(deskModel({ durationSec: 20, bars: null, chart }).placeOf(span).full).toBe('from 0:08.0 to 0:10.0')
  })

  it('says everything the lanes show as a table', () => {
    expect(model.barRows()).toHaveLength(10)
    expect(model.barRows()[4]).toEqual({
      bar: 5,
      name: 'bar 3, 1st chorus',
      time: '0:08.0',
      section: 'B section',
      chords: 'Fm7, B♭7'
    })
  })

  it('stands without bars and without a chart', () => {
    const bare = deskModel({ durationSec: 20, bars: { anchors: [], meters: [], marks: [] }, chart: null })
    expect(bare.barMap).toBeNull()
    expect(bare.rows).toEqual([])
    expect(bare.hasChords).toBe(false)
    const noChart = deskModel({ durationSec: 20, bars, chart: null })
    expect(noChart.rows.map(({ kind }) => kind)).toEqual(['bars', 'bars'])
    expect(noChart.barLabel(9)).toBe('9')
    expect(noChart.sectionMarks).toEqual([])
  })
})

describe('commentsByBar', () => {
  it('counts open and settled ones where they begin', () => {
    const counts = commentsByBar(model.barMap, [
      { startSec: 8.1, isOpen: true },
      { startSec: 9.9, isOpen: false },
      { startSec: 10, isOpen: false }
    ])
    expect([...counts]).toEqual([
      [5, { open: 1, settled: 1 }],
      [6, { open: 0, settled: 1 }]
    ])
  })
})
