import { describe, expect, it } from 'vitest'
import { loopFrom, restSecFor } from '@shared/practice/loops'
import { createBarMap } from '@shared/timing/bar-map'
import { plainMap } from './plain-map'

const span = { startSec: 4, endSec: 8 }

describe('a rest between two passes', () => {
  it('lasts so many felt beats of the take, half a second each without a bar map', () => {
    expect(restSecFor(plainMap('4/4', 0.6), span, 2)).toBeCloseTo(1.2, 9)
    expect(restSecFor(plainMap('6/8', 0.75), span, 2)).toBeCloseTo(1.5, 9)
    expect([restSecFor(null, span, 3), restSecFor(null, span, 0)]).toEqual([1.5, 0])
  })

  it('is in the tempo the loop ends in', () => {
    const slowing = createBarMap({
      anchors: [0, 4, 8, 20].map((sec, i) => ({
        id: `${i}`,
        sec,
        position: { bar: [1, 3, 4, 5][i] as number, beat: { n: 1, d: 1 } }
      })),
      meters: [],
      marks: []
    })
    expect(restSecFor(slowing, span, 1)).toBeCloseTo(1, 6)
  })
})

describe('the loop a player is given', () => {
  const ladder = { from: 0.6, to: 1, step: 0.05, every: 4 }

  it('has the kept place, its rest in seconds and its ladder', () => {
    expect(loopFrom({ span, ladder, restBeats: 2 }, null)).toEqual({ span, restSec: 1, ladder })
    expect(loopFrom({ span, ladder: null, restBeats: 0 }, null)).toEqual({ span })
  })
})
