import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { placeBefore } from '@shared/practice/again-from'
import { createBarMap } from '@shared/timing/bar-map'
import { anyBarMapBody } from '../timing/random-bar-map'
import { plainMap } from './plain-map'

describe('again from some bars before', () => {
  // Bars of two seconds, bar 1 at 1 s.
  const map = plainMap('4/4', 0.5, 1)

  it('goes to the line of the bar so many before this one', () => {
    expect(placeBefore(map, 38.2, 2)).toBe(map.barSec(17))
    expect(placeBefore(map, map.barSec(19), 2)).toBe(map.barSec(17))
    expect(placeBefore(map, map.barSec(19) - 0.01, 2)).toBe(map.barSec(17))
    expect(placeBefore(map, 38.2, 0)).toBe(map.barSec(19))
  })

  it('goes on back when asked again, to the start of the take and no further', () => {
    const once = placeBefore(map, 8.5, 2)
    const twice = placeBefore(map, once, 2)
    expect([once, twice, placeBefore(map, twice, 2)]).toEqual([3, 0, 0])
  })

  it('takes two seconds for a bar where there are none', () => {
    expect([placeBefore(null, 10, 2), placeBefore(null, 3, 2), placeBefore(null, Number.NaN, 1)]).toEqual([6, 0, 0])
  })

  it('always lands on a line at or before the place, or at the start', () => {
    fc.assert(
      fc.property(
        anyBarMapBody(),
        fc.double({ min: 0, max: 200, noNaN: true }),
        fc.integer({ min: 1, max: 8 }),
        (body, sec, bars) => {
          const any = createBarMap(body)
          if (!any) return
          const place = placeBefore(any, sec, bars)
          expect(place).toBeLessThanOrEqual(sec)
          if (place > 0) expect(any.barSec(any.barAt(place + 1e-9))).toBeCloseTo(place, 6)
        }
      ),
      { numRuns: 100 }
    )
  })
})
