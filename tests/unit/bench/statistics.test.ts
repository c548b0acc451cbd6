import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { inPairs, middle, pairRatio, percentile } from '../../bench/statistics.ts'

const values = fc.array(fc.double({ noNaN: true, noDefaultInfinity: true }), { minLength: 1, maxLength: 50 })

describe('percentile', () => {
  it('takes the nearest rank', () => {
    const ten = [7, 1, 10, 3, 2, 9, 4, 8, 5, 6]
    expect([0, 0.05, 0.5, 0.51, 0.95, 1].map((share) => percentile(ten, share))).toEqual([1, 1, 5, 6, 10, 10])
    expect(percentile([], 0.5)).toBeNaN()
  })

  it('is exceeded by no more than the rest of the values, and is one of them', () => {
    fc.assert(
      fc.property(values, fc.double({ min: 0, max: 1, noNaN: true }), (list, share) => {
        const at = percentile(list, share)
        expect(list).toContain(at)
        const within = list.filter((value) => value <= at).length
        const below = list.filter((value) => value < at).length
        expect(within).toBeGreaterThanOrEqual(share * list.length)
        expect(below).toBeLessThanOrEqual(share * list.length)
      })
    )
  })

  it('leaves the list as it was', () => {
    const list = [3, 1, 2]
    percentile(list, 0.5)
    expect(list).toEqual([3, 1, 2])
  })
})

describe('middle', () => {
  it('says with NaN that there was nothing to measure', () => {
    expect(middle([])).toBeNaN()
    expect(middle([4, 1, 3, 2])).toBe(2.5)
  })
})

describe('pairRatio', () => {
  it('finds the factor between both whatever the load of each pair', () => {
    const load = fc.array(fc.double({ min: 0.1, max: 100, noNaN: true }), { minLength: 1, maxLength: 30 })
    fc.assert(
      fc.property(load, fc.double({ min: 0.1, max: 10, noNaN: true }), (peer, factor) => {
        expect(pairRatio({ ours: peer.map((value) => value * factor), peer })).toBeCloseTo(factor, 9)
      })
    )
  })

  it('is not moved by one pair that went wrong', () => {
    expect(pairRatio({ ours: [2, 2, 90], peer: [1, 1, 1] })).toBe(2)
  })
})

describe('inPairs', () => {
  it('goes by turns and lets each begin equally often', async () => {
    const order: string[] = []
    const side = (name: string) => async (round: number) => order.push(`${name}${round}`)
    const pairs = await inPairs(4, side('a'), side('b'))
    expect(order).toEqual(['a0', 'b0', 'b1', 'a1', 'a2', 'b2', 'b3', 'a3'])
    expect(pairs).toEqual({ ours: [1, 4, 5, 8], peer: [2, 3, 6, 7] })
  })
})
