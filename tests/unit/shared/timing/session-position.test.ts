import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { sessionPosition, type SharedPlayback } from '@shared/timing/session-position'

const state = (overrides: Partial<SharedPlayback> = {}): SharedPlayback => ({
  positionSec: 10,
  rate: 1,
  playing: true,
  loop: null,
  atServerMs: 1_000_000,
  durationSec: 60,
  ...overrides
})
const after = (sec: number, overrides: Partial<SharedPlayback> = {}) =>
  sessionPosition(state(overrides), 1_000_000 + sec * 1000)

const anyState: fc.Arbitrary<SharedPlayback> = fc
  .record({
    positionSec: fc.double({ min: 0, max: 60, noNaN: true }),
    rate: fc.double({ min: 0.2, max: 1.5, noNaN: true }),
    ends: fc.option(
      fc.tuple(fc.double({ min: 0, max: 60, noNaN: true }), fc.double({ min: 0.05, max: 30, noNaN: true }))
    ),
    playing: fc.boolean()
  })
  .map(({ ends, ...rest }) =>
    state({ ...rest, loop: ends && { startSec: ends[0], endSec: Math.min(60, ends[0] + ends[1]) } })
  )
const wait = fc.double({ min: 0, max: 500, noNaN: true })

describe('shared playhead', () => {
  it('runs at the shared speed from where it was', () => {
    expect(after(4)).toEqual({ positionSec: 14, playing: true, loops: 0 })
    expect(after(4, { rate: 0.5 }).positionSec).toBe(12)
    expect(after(4, { playing: false })).toEqual({ positionSec: 10, playing: false, loops: 0 })
  })

  it('comes round at the end of the loop', () => {
    const loop = { startSec: 8, endSec: 12 }
    expect(after(1.5, { loop }).positionSec).toBe(11.5)
    expect(after(2, { loop })).toEqual({ positionSec: 8, playing: true, loops: 1 })
    expect(after(11, { loop })).toEqual({ positionSec: 9, playing: true, loops: 3 })
    expect(after(3, { loop, positionSec: 5 }).positionSec).toBe(8)
  })

  it('plays on when it was set beyond the loop, and stops at the end of the take', () => {
    expect(after(4, { loop: { startSec: 2, endSec: 10 } }).positionSec).toBe(14)
    expect(after(80)).toEqual({ positionSec: 60, playing: false, loops: 0 })
  })

  it('takes a loop that is none as none', () => {
    expect(after(4, { loop: { startSec: 12, endSec: 11 } }).positionSec).toBe(14)
    expect(after(4, { loop: { startSec: 70, endSec: 80 } }).positionSec).toBe(14)
  })

  it('does not go back for a moment before it was set', () => {
    expect(after(-3).positionSec).toBe(10)
  })

  it('is always inside the take, and inside the loop once it has come round', () => {
    fc.assert(
      fc.property(anyState, wait, (any, sec) => {
        const place = sessionPosition(any, any.atServerMs + sec * 1000)
        expect(place.positionSec).toBeGreaterThanOrEqual(0)
        expect(place.positionSec).toBeLessThanOrEqual(any.durationSec)
        if (place.loops > 0) {
          expect(place.positionSec).toBeGreaterThanOrEqual(any.loop?.startSec ?? Infinity)
          expect(place.positionSec).toBeLessThan(any.loop?.endSec ?? -Infinity)
        }
      }),
      { numRuns: 500 }
    )
  })

  it('is the same whether or not somebody asked and restated it on the way', () => {
    fc.assert(
      fc.property(anyState, wait, wait, (any, first, second) => {
        const midMs = any.atServerMs + first * 1000
        const mid = sessionPosition(any, midMs)
        const restated = { ...any, positionSec: mid.positionSec, playing: mid.playing, atServerMs: midMs }
        const endMs = midMs + second * 1000
        const [direct, byWay] = [sessionPosition(any, endMs), sessionPosition(restated, endMs)]
        expect(byWay.playing).toBe(direct.playing)
        // Just at the loop's end rounding may put one on either side of the seam.
        const apart = Math.abs(byWay.positionSec - direct.positionSec)
        const loopSec = any.loop ? any.loop.endSec - any.loop.startSec : Infinity
        expect(Math.min(apart, Math.abs(loopSec - apart))).toBeLessThan(1e-6)
      }),
      { numRuns: 500 }
    )
  })

  it('answers anything without NaN', () => {
    const odd = fc.oneof(fc.double(), fc.constantFrom(NaN, Infinity, -Infinity))
    fc.assert(
      fc.property(odd, odd, odd, odd, odd, (positionSec, rate, durationSec, startSec, now) => {
        const loop = { startSec, endSec: positionSec }
        const place = sessionPosition(state({ positionSec, rate, durationSec, loop }), now)
        expect(Number.isFinite(place.positionSec) && Number.isFinite(place.loops)).toBe(true)
      })
    )
  })
})
