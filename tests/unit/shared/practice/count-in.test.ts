import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { countInFor } from '@shared/practice/count-in'
import { createBarMap } from '@shared/timing/bar-map'
import { anyBarMapBody, meter } from '../timing/random-bar-map'
import { plainMap } from './plain-map'

/** `lead | sec:accent ...`, to the thousandth. */
const words = (...args: Parameters<typeof countInFor>) => {
  const counted = countInFor(...args)
  const round = (sec: number) => Math.round(sec * 1000) / 1000
  return (
    counted && `${round(counted.leadSec)} | ${counted.clicks.map((c) => `${round(c.atSec)}:${c.accent}`).join(' ')}`
  )
}

describe('counting in', () => {
  const map = plainMap('4/4')

  it('counts every beat of one bar before a bar line', () => {
    expect(words(map, 4, 1, 'one bar')).toBe('2 | -2:2 -1.5:1 -1:1 -0.5:1')
  })

  it('counts 1, 3, then 1 2 3 4 of two bars', () => {
    expect(words(map, 4, 1, 'two bars')).toBe('4 | -4:2 -3:1 -2:2 -1.5:1 -1:1 -0.5:1')
  })

  it.each([
    ['3/4', '3 | -3:2 -1.5:2 -1:1 -0.5:1'],
    ['6/8', '2 | -2:2 -1:2 -0.5:1'],
    ['12/8', '4 | -4:2 -3:1 -2:2 -1.5:1 -1:1 -0.5:1'],
    ['5/4', '5 | -5:2 -2.5:2 -2:1 -1.5:1 -1:1 -0.5:1'],
    ['6/4', '6 | -6:2 -4.5:1 -3:2 -2.5:1 -2:1 -1.5:1 -1:1 -0.5:1']
  ])('counts two bars of %s as they are felt', (text, expected) => {
    expect(words(plainMap(text), 0, 1, 'two bars')).toBe(expected)
  })

  it('leads through the begun bar into a beat within it', () => {
    expect(words(map, 5, 1, 'one bar')).toBe('3 | -3:2 -2.5:1 -2:1 -1.5:1 -1:2 -0.5:1')
    expect(words(map, 4.5, 1, 'two bars')).toBe('4.5 | -4.5:2 -3.5:1 -2.5:2 -2:1 -1.5:1 -1:1 -0.5:2')
  })

  it('leads into a place between two beats, the beat before it struck', () => {
    expect(words(map, 5.25, 1, 'one bar')).toBe('3.25 | -3.25:2 -2.75:1 -2.25:1 -1.75:1 -1.25:2 -0.75:1 -0.25:1')
  })

  it('takes a start a hair beside a beat for that beat, in time with it', () => {
    expect(words(map, 3.99, 1, 'one bar')).toBe('1.99 | -1.99:2 -1.49:1 -0.99:1 -0.49:1')
    expect(words(map, 4.01, 1, 'one bar')).toBe('2.01 | -2.01:2 -1.51:1 -1.01:1 -0.51:1')
    expect(words(map, 4.99, 1, 'one bar')).toBe('2.99 | -2.99:2 -2.49:1 -1.99:1 -1.49:1 -0.99:2 -0.49:1')
  })

  it('counts slower at half speed', () => {
    expect(words(map, 4, 0.5, 'one bar')).toBe('4 | -4:2 -3:1 -2:1 -1:1')
  })

  it('counts in the meter that comes', () => {
    const changing = plainMap('4/4', 0.5, 0, [{ bar: 3, meter: meter('3/4') }])
    expect(words(changing, 4, 1, 'one bar')).toBe('1.5 | -1.5:2 -1:1 -0.5:1')
    expect(words(changing, 3.99, 1, 'one bar')).toBe('1.49 | -1.49:2 -0.99:1 -0.49:1')
  })

  it('is none without a bar map, when none is wanted and at no speed', () => {
    expect([
      countInFor(null, 4, 1, 'one bar'),
      countInFor(map, 4, 1, 'none'),
      countInFor(map, 4, 0, 'one bar')
    ]).toEqual([null, null, null])
  })

  it('rises towards the start, begins with its first click, and has every click a whole number of beats from the start’s beat', () => {
    const choice = fc.constantFrom('one bar' as const, 'two bars' as const)
    fc.assert(
      fc.property(
        anyBarMapBody({ maxAnchors: 6 }),
        choice,
        fc.double({ min: -5, max: 100, noNaN: true }),
        fc.double({ min: 0.2, max: 1.5, noNaN: true }),
        (body, counted, startSec, rate) => {
          const barMap = createBarMap(body)
          const countIn = barMap && countInFor(barMap, startSec, rate, counted)
          if (!countIn) return
          const at = countIn.clicks.map(({ atSec }) => atSec)
          expect(at[0]).toBeCloseTo(-countIn.leadSec, 9)
          expect(at.at(-1)).toBeLessThan(0)
          expect(countIn.clicks[0]?.accent).toBe(2)
          const gaps = at.slice(1).map((sec, i) => sec - (at[i] as number))
          const beat = Math.min(...gaps, Infinity)
          for (const gap of gaps) expect(Math.abs(gap / beat - Math.round(gap / beat))).toBeLessThan(1e-6)
        }
      ),
      { numRuns: 100 }
    )
  })
})
