import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createBarMap, type BarMap } from '@shared/timing/bar-map'
import { createFormMap } from '@shared/timing/passes'
import { pointWords, spanWords, spokenPlace, type PlaceSetting } from '@shared/timing/place-words'
import { rational } from '@shared/timing/rational'
import { sectionStarts, sectionWords } from '@shared/timing/sections'
import { spokenTime, timeWords } from '@shared/timing/time-words'
import type { BarMapBody } from '@shared/timing/types'
import { anyBarMapBody, meter } from './random-bar-map'

/** A bar lasts two seconds, bar 1 starts at 0. */
const twoSecondBars = (text = '4/4'): BarMapBody => ({
  anchors: [1, 2].map((bar) => ({ id: `a${bar}`, sec: (bar - 1) * 2, position: { bar, beat: rational(1) } })),
  meters: [{ bar: 1, meter: meter(text) }],
  marks: []
})
const barMap = createBarMap(twoSecondBars()) as BarMap
const sections = [
  { name: 'A', occurrence: 1, formBar: 1 },
  { name: 'A', occurrence: 2, formBar: 9 },
  { name: 'B', occurrence: 1, formBar: 17 },
  { name: 'A', occurrence: 3, formBar: 25 }
]
const chorus: PlaceSetting = {
  barMap,
  form: createFormMap({ marks: [{ bar: 1, formBar: 1, newPass: true }], formLength: 32, cyclic: true }),
  sections,
  chordAt: (formBar, beat) => (formBar === 20 ? (beat.n < 3 * beat.d ? 'Dm7' : 'G7') : 'Gm7')
}
const noForm: PlaceSetting = { barMap, form: null, sections: [] }
/** Second at which a beat (from 1, may be broken) of a bar through the take sounds. */
const at = (bar: number, beat = 1) => (bar - 1) * 2 + (beat - 1) / 2
const point = (bar: number, beat: number, setting = noForm) => pointWords(at(bar, beat), setting).full
const span = (from: number, to: number, setting = noForm) => spanWords({ startSec: from, endSec: to }, setting).full

describe('words for a moment', () => {
  // How players count subdivisions: common practice, no source.
  it.each([
    [3, 'bar 19, beat 3'],
    [3.5, 'bar 19, the and of 3'],
    [2 + 1 / 3, 'bar 19, 2nd triplet of 2'],
    [2 + 2 / 3, 'bar 19, 3rd triplet of 2'],
    [1.25, 'bar 19, the e of 1'],
    [4.75, 'bar 19, the a of 4'],
    [4.97, 'bar 20, beat 1'],
    [2.96, 'bar 19, beat 3'],
    [3.03, 'bar 19, beat 3']
  ])('says beat %d of a bar of four', (beat, words) => expect(point(19, beat)).toBe(words))

  it('names the bar within the form, the section, the chorus and the chord', () => {
    expect(point(51, 3.5, chorus)).toBe('bar 19, the and of 3 · B section, 2nd chorus · over Gm7')
    expect(point(20, 3, chorus)).toBe('bar 20, beat 3 · B section, 1st chorus · over G7')
    expect(point(9, 1, chorus)).toBe('bar 9, beat 1 · second A, 1st chorus · over Gm7')
    expect(point(25, 1, chorus)).toBe('bar 25, beat 1 · last A, 1st chorus · over Gm7')
  })

  it('says time through where the form does not come round', () => {
    const marks = [{ bar: 1, formBar: 1, newPass: true }]
    const song = { ...chorus, form: createFormMap({ marks, formLength: 32, cyclic: false }) }
    expect(pointWords(at(17), song).where).toBe('B section, 1st time through')
    expect(point(34, 1, song)).toBe('ending, bar 2, beat 1')
  })

  it('says pick-up, introduction and interlude in words', () => {
    const marks = [
      { bar: 5, formBar: 1, newPass: true },
      { bar: 37, formBar: null, newPass: false },
      { bar: 41, formBar: 1, newPass: true }
    ]
    const setting = { ...chorus, form: createFormMap({ marks, formLength: 32, cyclic: true }) }
    expect(point(0, 4)).toBe('pick-up, beat 4')
    expect(point(-1, 4)).toBe('2 bars before bar 1, beat 4')
    expect(point(3, 2, setting)).toBe('introduction, bar 3, beat 2')
    expect(point(38, 1, setting)).toBe('interlude, bar 2, beat 1')
  })

  it('counts felt beats in compound time', () => {
    const setting = { ...noForm, barMap: createBarMap(twoSecondBars('6/8')) }
    expect(pointWords(1, setting).full).toBe('bar 1, beat 2')
    expect(pointWords(1 + 1 / 3, setting).full).toBe('bar 1, 2nd eighth of 2')
    expect(pointWords(1 / 2, setting).full).toBe('bar 1, the and of the 2nd eighth of 1')
  })

  it('says the time without a bar map', () => {
    expect(pointWords(83.44, { ...noForm, barMap: null }).full).toBe('at 1:23.4')
  })

  it('never says a place as a broken number', () => {
    fc.assert(
      fc.property(anyBarMapBody(), fc.double({ min: 0, max: 3600, noNaN: true }), (body, sec) => {
        expect(pointWords(sec, { ...noForm, barMap: createBarMap(body) }).full).not.toMatch(/\d[.,]\d|NaN|undefined/)
      })
    )
  })
})

describe('words for a span', () => {
  it('names whole bars by first and last', () => {
    expect(span(at(17), at(19))).toBe('bars 17 to 18')
    expect(span(at(17), at(18))).toBe('bar 17')
    expect(span(at(49), at(51), chorus)).toBe('bars 17 to 18 · B section, 2nd chorus · over Gm7')
    expect(span(at(19), at(21), chorus)).toBe('bars 19 to 20 · B section, 1st chorus · over Gm7, Dm7 and G7')
  })

  it('names beats by first and last', () => {
    expect(span(at(17, 2), at(17, 4))).toBe('bar 17, beats 2 to 3')
    expect(span(at(17, 2), at(17, 3))).toBe('bar 17, beat 2')
    expect(span(at(17, 3), at(18, 3))).toBe('bar 17, beat 3 to bar 18, beat 2')
    expect(span(at(17, 3.5), at(18, 1))).toBe('bar 17, the and of 3 to beat 4')
    expect(span(at(17, 3), at(18, 2.5))).toBe('bar 17, beat 3 to bar 18, the and of 2')
  })

  it('names a point or a very short span by its start', () => {
    expect(span(at(19, 3.5), at(19, 3.5))).toBe('bar 19, the and of 3')
    expect(span(at(19, 3.5), at(19, 3.8))).toBe('bar 19, the and of 3')
    expect(span(at(19, 3.5), at(19, 2))).toBe('bar 19, the and of 3')
  })

  it('names both passes or sections where a span goes from one to the next', () => {
    expect(span(at(31), at(35), chorus)).toBe('bar 31, 1st chorus to bar 2, 2nd chorus · last A to first A · over Gm7')
    expect(span(at(15), at(19), chorus)).toBe('bars 15 to 18 · second A to B section, 1st chorus · over Gm7')
    expect(span(at(0), at(3), chorus)).toBe('pick-up to bar 2, 1st chorus · over Gm7')
  })

  it('says from when to when without a bar map', () => {
    expect(span(83.44, 85, { ...noForm, barMap: null })).toBe('from 1:23.4 to 1:25.0')
  })

  it('says something whole for any span', () => {
    const sec = fc.double({ min: -20, max: 400, noNaN: true })
    fc.assert(
      fc.property(sec, sec, (startSec, endSec) => {
        const { full } = spanWords({ startSec, endSec }, chorus)
        expect(full).toMatch(/^(bars? \d|pick-up|\d+ bars before bar 1)/)
        expect(full).not.toMatch(/\d[.]\d|NaN|undefined|null/)
      }),
      { numRuns: 500 }
    )
  })
})

describe('words for sections and times', () => {
  it('tells sections of one name apart', () => {
    expect(sections.map((section) => sectionWords(section, sections))).toEqual([
      'first A',
      'second A',
      'B section',
      'last A'
    ])
    const named = [{ name: 'bridge', occurrence: 1, formBar: 1 }]
    expect(sectionWords(named[0] as (typeof named)[0], named)).toBe('bridge')
  })

  it('begins a section at each playing of it', () => {
    const bar = (sectionName: string, sectionOccurrence: number, formBar: number, orderIndex: number) => ({
      sectionName,
      sectionOccurrence,
      formBar,
      orderIndex
    })
    const bars = [bar('A', 1, 1, 0), bar('A', 1, 2, 0), bar('A', 2, 3, 1), bar('B', 1, 4, 2), bar('B', 1, 5, 2)]
    expect(sectionStarts(bars)).toEqual([
      { name: 'A', occurrence: 1, formBar: 1 },
      { name: 'A', occurrence: 2, formBar: 3 },
      { name: 'B', occurrence: 1, formBar: 4 }
    ])
  })

  it('writes times as minutes, seconds and tenths', () => {
    expect([0, 9.96, 59.96, 83.44, 3723.25].map(timeWords)).toEqual(['0:00.0', '0:10.0', '1:00.0', '1:23.4', '62:03.3'])
    expect([timeWords(-1.5), timeWords(-0.01), timeWords(Number.NaN)]).toEqual(['−0:01.5', '0:00.0', '0:00.0'])
  })

  it('speaks a time with bar and chord', () => {
    expect(spokenTime(123.9, 'bar 41', 'C minor seventh')).toBe('2 minutes 3 seconds, bar 41, C minor seventh')
    expect([spokenTime(61), spokenTime(1), spokenTime(0)]).toEqual(['1 minute 1 second', '1 second', '0 seconds'])
    expect(spokenPlace(123, noForm)).toBe('2 minutes 3 seconds, bar 62')
    expect(spokenPlace(123, { ...noForm, barMap: null }, 'C seventh')).toBe('2 minutes 3 seconds, C seventh')
  })
})
