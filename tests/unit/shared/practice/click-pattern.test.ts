import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { ClickGrid, clicksFor, ClickPattern, clickWords } from '@shared/practice/click-pattern'
import { createBarMap } from '@shared/timing/bar-map'
import { pulsesPerBar } from '@shared/timing/meter'
import { anyBarMapBody, meter } from '../timing/random-bar-map'
import { plainMap } from './plain-map'

const plain: ClickGrid = { pattern: 'every beat', subdivision: 1, silence: null }

/** `sec:accent`, the seconds to the thousandth. */
const laid = (text: string, grid: Partial<ClickGrid>, startSec: number, endSec: number) =>
  clicksFor(plainMap(text), { ...plain, ...grid }, { startSec, endSec }).map(
    ({ sec, accent }) => `${Math.round(sec * 1000) / 1000}:${accent}`
  )

const anyGrid: fc.Arbitrary<ClickGrid> = fc.record({
  pattern: fc.constantFrom(...ClickPattern.options),
  subdivision: fc.integer({ min: 1, max: 4 }),
  swing: fc.constantFrom(undefined, 1, 1.5, 2, 3),
  silence: fc.option(
    fc.record({ heardBars: fc.integer({ min: 1, max: 16 }), silentBars: fc.integer({ min: 1, max: 16 }) })
  )
})

describe('clicks along a take', () => {
  // Beats of half a second.
  it.each([
    ['4/4', 'every beat', ['0:2', '0.5:1', '1:1', '1.5:1', '2:2', '2.5:1', '3:1', '3.5:1']],
    ['4/4', '2 and 4', ['0.5:1', '1.5:1', '2.5:1', '3.5:1']],
    ['4/4', '1 only', ['0:2', '2:2']],
    ['4/4', '4 only', ['1.5:1', '3.5:1']],
    ['4/4', 'off-beats', ['0.25:1', '0.75:1', '1.25:1', '1.75:1', '2.25:1', '2.75:1', '3.25:1', '3.75:1']],
    ['4/4', 'once in two bars', ['0:2']],
    ['3/4', '2 and 4', ['0.5:1', '1:1', '2:1', '2.5:1', '3.5:1']],
    ['3/4', '4 only', ['1:1', '2.5:1']],
    ['5/4', '2 and 4', ['0.5:1', '1.5:1', '3:1']],
    ['6/8', 'every beat', ['0:2', '0.5:1', '1:2', '1.5:1', '2:2', '2.5:1', '3:2', '3.5:1']],
    ['6/8', '2 and 4', ['0.5:1', '1.5:1', '2.5:1', '3.5:1']],
    ['6/8', 'off-beats', ['0.333:1', '0.833:1', '1.333:1', '1.833:1', '2.333:1', '2.833:1', '3.333:1', '3.833:1']]
  ] as const)('in %s fall on %s', (text, pattern, expected) => {
    expect(laid(text, { pattern }, 0, 4)).toEqual(expected)
  })

  it('divide every beat softly under the pattern', () => {
    expect(laid('4/4', { pattern: '2 and 4', subdivision: 2 }, 0, 1)).toEqual(['0:0', '0.25:0', '0.5:1', '0.75:0'])
    expect(laid('4/4', { subdivision: 3 }, 0, 0.5)).toEqual(['0:2', '0.167:0', '0.333:0'])
    expect(laid('4/4', { subdivision: 4 }, 0, 0.5)).toEqual(['0:2', '0.125:0', '0.25:0', '0.375:0'])
    expect(laid('6/8', { subdivision: 3 }, 0, 0.5)).toEqual(['0:2', '0.167:0', '0.333:0'])
  })

  it('swing the halves by their ratio, off-beats with them', () => {
    expect(laid('4/4', { subdivision: 2, swing: 2 }, 0, 1)).toEqual(['0:2', '0.333:0', '0.5:1', '0.833:0'])
    expect(laid('4/4', { subdivision: 2, swing: 3 }, 0, 0.5)).toEqual(['0:2', '0.375:0'])
    expect(laid('4/4', { pattern: 'off-beats', swing: 2 }, 0, 1)).toEqual(['0.333:1', '0.833:1'])
    expect(laid('4/4', { pattern: 'off-beats', subdivision: 3 }, 0, 0.5)).toEqual(['0:0', '0.167:0', '0.333:1'])
  })

  it('leave bars silent in turn, counted from bar 1, but never the pick-up', () => {
    const silence = { heardBars: 2, silentBars: 1 }
    const map = plainMap('4/4', 0.5, 2)
    const bars = clicksFor(map, { ...plain, pattern: '1 only', silence }, { startSec: 0, endSec: 16 })
    expect(bars.map(({ sec }) => map.barAt(sec))).toEqual([0, 1, 2, 4, 5, 7])
  })

  it('follow a change of meter', () => {
    const map = plainMap('4/4', 0.5, 0, [{ bar: 2, meter: meter('3/4') }])
    const clicks = clicksFor(map, { ...plain, pattern: '4 only' }, { startSec: 0, endSec: 5 })
    expect(clicks.map(({ sec }) => sec)).toEqual([1.5, 3, 4.5])
  })

  it('belong to a loop from its first line on, up to but without its end, though these come rounded', () => {
    expect(laid('4/4', {}, 2 + 4e-7, 4 - 4e-7)).toEqual(['2:2', '2.5:1', '3:1', '3.5:1'])
    expect(laid('4/4', {}, 2 - 4e-7, 4 + 4e-7)).toEqual(['2:2', '2.5:1', '3:1', '3.5:1'])
    expect(laid('4/4', {}, 2.1, 2.1)).toEqual([])
  })

  it('rise, stay in the span, strike the first of a bar hardest, and come the same from parts of the span', () => {
    fc.assert(
      fc.property(
        anyBarMapBody({ maxAnchors: 8 }),
        anyGrid,
        fc.double({ min: 0.1, max: 0.9, noNaN: true }),
        (body, grid, part) => {
          const map = createBarMap(body)
          if (!map) return
          const span = { startSec: map.barSec(-1), endSec: map.barSec(20) }
          const clicks = clicksFor(map, grid, span)
          clicks.forEach(({ sec, accent }, i) => {
            if (i > 0) expect(sec).toBeGreaterThan(clicks[i - 1]?.sec as number)
            const { beat } = map.positionAt(sec)
            if (accent === 2) expect([beat.n, beat.d]).toEqual([1, 1])
          })
          const cut = span.startSec + (span.endSec - span.startSec) * part
          const halves = [
            { ...span, endSec: cut },
            { ...span, startSec: cut }
          ].flatMap((half) => clicksFor(map, grid, half))
          expect(halves).toEqual(clicks)
        }
      ),
      { numRuns: 60 }
    )
  })

  it('fall once on every felt beat of random maps', () => {
    fc.assert(
      fc.property(anyBarMapBody({ maxAnchors: 8 }), (body) => {
        const map = createBarMap(body)
        if (!map) return
        for (const bar of [0, 1, 7]) {
          const beats = map.beatsOf(bar).map(({ sec }) => sec)
          expect(clicksFor(map, plain, map.barSpan(bar)).map(({ sec }) => sec)).toEqual(beats)
          expect(beats).toHaveLength(pulsesPerBar(map.meterAt(bar)))
        }
      }),
      { numRuns: 60 }
    )
  })
})

describe('a click in words', () => {
  it.each<[Partial<ClickGrid>, string, string]>([
    [{}, '4/4', 'every beat'],
    [{ pattern: '2 and 4', silence: { heardBars: 3, silentBars: 1 } }, '4/4', '2 and 4, silent every fourth bar'],
    [{ pattern: '2 and 4' }, '3/4', '2 and 3'],
    [{ pattern: '2 and 4' }, '6/8', '2 only'],
    [{ pattern: '2 and 4' }, '7/4', '2, 4 and 6'],
    [{ pattern: '4 only' }, '3/4', '3 only'],
    [{ pattern: 'off-beats', subdivision: 3 }, '4/4', 'off-beats, each beat in three'],
    [{ subdivision: 2, swing: 2 }, '4/4', 'every beat, each beat in two, swung 2 to 1'],
    [{ subdivision: 2, swing: 1 }, '4/4', 'every beat, each beat in two'],
    [
      { pattern: 'once in two bars', silence: { heardBars: 4, silentBars: 2 } },
      '4/4',
      'once in two bars, 4 bars heard, 2 silent'
    ],
    [{ silence: { heardBars: 1, silentBars: 1 } }, '4/4', 'every beat, silent every second bar'],
    [{ silence: { heardBars: 11, silentBars: 1 } }, '4/4', 'every beat, silent every 12th bar'],
    [{ silence: { heardBars: 1, silentBars: 3 } }, '4/4', 'every beat, 1 bar heard, 3 silent']
  ])('%j in %s says %s', (grid, text, words) => {
    expect(clickWords({ ...plain, ...grid }, meter(text))).toBe(words)
  })

  it('takes what can be laid and nothing else', () => {
    fc.assert(
      fc.property(anyGrid, (grid) => ClickGrid.safeParse(grid).success),
      { numRuns: 30 }
    )
    expect(ClickGrid.safeParse({ ...plain, subdivision: 5 }).success).toBe(false)
    expect(ClickGrid.safeParse({ ...plain, pattern: '3 only' }).success).toBe(false)
    expect(ClickGrid.safeParse({ ...plain, silence: { heardBars: 0, silentBars: 1 } }).success).toBe(false)
  })
})
