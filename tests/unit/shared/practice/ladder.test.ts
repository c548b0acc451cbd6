import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { ladderLimits, ladderRate, ladderWords, type SpeedLadder } from '@shared/practice/ladder'
import { readLadder } from '@shared/practice/read-ladder'

const ladder = (from: number, to: number, step: number, every: number): SpeedLadder => ({ from, to, step, every })

/** Rates and steps to the tenth of a percent, as the sentence writes them. */
const anyLadder = fc
  .tuple(
    fc.integer({ min: 200, max: 1500 }),
    fc.integer({ min: 200, max: 1500 }),
    fc.integer({ min: 1, max: 300 }),
    fc.integer({ min: 1, max: ladderLimits.maxEvery })
  )
  .filter(([from, to]) => from !== to)
  .map(([from, to, step, every]) => ladder(from / 1000, to / 1000, (to > from ? step : -step) / 1000, every))

describe('the rates of a ladder', () => {
  it('change after so many passes and stay where they lead', () => {
    const rates = Array.from({ length: 8 }, (_, pass) => ladderRate(ladder(0.6, 0.7, 0.04, 2), pass))
    expect(rates).toEqual([0.6, 0.6, 0.64, 0.64, 0.68, 0.68, 0.7, 0.7])
    expect([0, 1, 2].map((pass) => ladderRate(ladder(1, 0.8, -0.15, 1), pass))).toEqual([1, 0.85, 0.8])
  })

  it('go one way only and arrive', () => {
    fc.assert(
      fc.property(anyLadder, (any) => {
        const rates = Array.from({ length: 60 }, (_, k) => ladderRate(any, k * any.every))
        rates.slice(1).forEach((rate, k) => expect((rate - (rates[k] as number)) * any.step).toBeGreaterThanOrEqual(0))
        const passes = Math.ceil(Math.abs(any.to - any.from) / Math.abs(any.step)) * any.every
        expect(ladderRate(any, passes + any.every)).toBe(any.to)
      }),
      { numRuns: 100 }
    )
  })
})

describe('the sentence of a ladder', () => {
  it('is written in one way', () => {
    expect(ladderWords(ladder(0.6, 1, 0.05, 4))).toBe('60 % to 100 %, up 5 after 4 times')
    expect(ladderWords(ladder(1, 0.625, -0.025, 1))).toBe('100 % to 62.5 %, down 2.5 after each time')
  })

  it('is read back as what was written', () => {
    fc.assert(
      fc.property(anyLadder, (any) => {
        expect(readLadder(ladderWords(any))).toEqual({ ok: true, value: any })
      }),
      { numRuns: 300 }
    )
  })

  it.each<[string, SpeedLadder]>([
    ['60 % to 100 %, up 5 after 4 times', ladder(0.6, 1, 0.05, 4)],
    ['60-100 up 5 every 4', ladder(0.6, 1, 0.05, 4)],
    ['60–100, +5 every 4 times', ladder(0.6, 1, 0.05, 4)],
    ['60%-100% +5 4x', ladder(0.6, 1, 0.05, 4)],
    ['from 50 to 90 by 2 after 3', ladder(0.5, 0.9, 0.02, 3)],
    ['From 62,5 % to 100 %, up 2,5 after 4 times', ladder(0.625, 1, 0.025, 4)],
    ['100 to 70 down 5 after 2', ladder(1, 0.7, -0.05, 2)],
    ['100 to 70 by 5 twice', ladder(1, 0.7, -0.05, 2)],
    ['100 to 70, -5 every time', ladder(1, 0.7, -0.05, 1)],
    ['100 → 70, 5 slower after each pass', ladder(1, 0.7, -0.05, 1)],
    ['from 60 by 5 to 100 after four passes', ladder(0.6, 1, 0.05, 4)],
    ['60 up to 100, 5 % faster every other time', ladder(0.6, 1, 0.05, 2)],
    ['60 to 100 after 4 times up by 5', ladder(0.6, 1, 0.05, 4)],
    ['start at 40 percent to 80 percent in steps of 4 every 3rd loop', ladder(0.4, 0.8, 0.04, 3)],
    ['  60   to 100 ,  up 5  after   10 times.', ladder(0.6, 1, 0.05, 10)],
    ['60 to 100 up 50 after 4', ladder(0.6, 1, 0.5, 4)]
  ])('is understood as typed: %s', (text, expected) => {
    expect(readLadder(text)).toEqual({ ok: true, value: expected })
  })

  it.each([
    ['', 'from', 'Say where it starts and where it ends: 60 % to 100 %.'],
    ['faster please', 'from', 'Say where it starts and where it ends: 60 % to 100 %.'],
    ['from 70 up 5 after 4 times', 'to', 'Say where it ends: 70 % to 100 %.'],
    ['60 to 100', 'step', 'Say by how much it changes: up 5.'],
    ['100 to 60 after 4 times', 'step', 'Say by how much it changes: down 5.'],
    ['60 to 100 up 5', 'every', 'Say after how many times it changes: after 4 times.'],
    ['10 to 100 up 5 after 4', 'from', 'Speeds go from 20 % to 150 %.'],
    ['60 to 160 up 5 after 4', 'to', 'Speeds go from 20 % to 150 %.'],
    ['80 to 80 up 5 after 4', 'to', 'It starts and ends at the same speed.'],
    ['60 to 100 up 0 after 4', 'step', 'With a step of 0 it never gets there.'],
    ['60 to 100 down 5 after 4', 'step', 'From 60 % to 100 % it goes up, not down.'],
    ['100 to 60 +5 after 4', 'step', 'From 100 % to 60 % it goes down, not up.'],
    ['60 to 100 up 5 after 0', 'every', 'It changes after a whole number of times, 1 to 99.'],
    ['60 to 100 up 5 after 2.5 times', 'every', 'It changes after a whole number of times, 1 to 99.'],
    ['60 to 100 up 5 after 4 times 7', 'rest', 'One number too many: 7.']
  ])('says what is missing or wrong in: %s', (text, part, message) => {
    expect(readLadder(text)).toEqual({ ok: false, error: { part, message } })
  })

  it('is read or refused, never thrown at, and what is read is within the limits', () => {
    const pieces = fc.constantFrom(
      '60',
      '100 %',
      ' to ',
      '-',
      'up 5',
      ' after 4',
      'times',
      ',',
      '7,5',
      'every ',
      'by',
      ' ',
      '%',
      '+',
      'twice'
    )
    const text = fc.oneof(
      fc.string(),
      fc.array(pieces, { maxLength: 9 }).map((list) => list.join(''))
    )
    fc.assert(
      fc.property(text, (any) => {
        const read = readLadder(any)
        if (!read.ok) {
          expect(read.error.message).toMatch(/\.$/)
          return
        }
        const { from, to, step, every } = read.value
        for (const rate of [from, to]) expect(rate >= ladderLimits.minRate && rate <= ladderLimits.maxRate).toBe(true)
        expect(step * (to - from)).toBeGreaterThan(0)
        expect(Number.isInteger(every) && every >= 1 && every <= ladderLimits.maxEvery).toBe(true)
      }),
      { numRuns: 500 }
    )
  })
})
