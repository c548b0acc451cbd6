import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { localLines } from '@shared/timing/local-line'
import { median, robustSpread } from '@shared/timing/statistics'

const line = (slope: number, from: number) => Array.from({ length: 30 }, (_, x) => ({ x, y: from + slope * x }))

describe('robust local lines', () => {
  it('leaves points on a line where they are, whatever the reach', () => {
    const number = fc.double({ min: -100, max: 100, noNaN: true })
    fc.assert(
      fc.property(number, number, fc.double({ min: 0, max: 40, noNaN: true }), (slope, from, reach) => {
        const points = line(slope, from)
        localLines(points, reach).forEach((y, i) => expect(y).toBeCloseTo(points[i]?.y ?? NaN, 6))
      })
    )
  })

  it('passes a single slip by, also at an end', () => {
    for (const slip of [0, 15, 29]) {
      const points = line(0.5, 10).map(({ x, y }) => ({ x, y: y + (x === slip ? 0.3 : 0.001 * (-1) ** x) }))
      localLines(points, 8).forEach((y, x) => expect(Math.abs(y - 10 - 0.5 * x)).toBeLessThan(0.003))
    }
  })

  it('gives the points themselves with no neighbour in reach', () => {
    expect(
      localLines(
        [
          { x: 0, y: 3 },
          { x: 1, y: 9 },
          { x: 2, y: 4 }
        ],
        1
      )
    ).toEqual([3, 9, 4])
    expect(localLines([], 4)).toEqual([])
  })
})

describe('robust statistics', () => {
  it('finds the middle', () => {
    expect([median([]), median([3, 1, 2]), median([4, 1, 3, 2])]).toEqual([null, 2, 2.5])
  })

  // The quartiles of the normal distribution lie 0.6745 standard deviations out (any table of it).
  it('judges the spread of normal noise from its quartiles, unmoved by a slip', () => {
    const quartiles = [-0.6745, -0.6745, 0, 0.6745, 0.6745]
    expect(robustSpread(quartiles)).toBeCloseTo(1, 3)
    expect(robustSpread([...quartiles, 0, 1000])).toBeCloseTo(1, 3)
    expect(robustSpread([])).toBe(0)
  })
})
