import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  add,
  compare,
  equal,
  FINE,
  multiply,
  nearestRational,
  negate,
  rational,
  toNumber
} from '@shared/timing/rational'

const fraction = fc
  .tuple(fc.integer({ min: -5000, max: 5000 }), fc.integer({ min: 1, max: 5000 }))
  .map(([n, d]) => rational(n, d))

describe('fractions', () => {
  it('reduces and keeps the denominator positive', () => {
    expect(rational(6, -4)).toEqual({ n: -3, d: 2 })
    expect(rational(0, 7)).toEqual({ n: 0, d: 1 })
    expect(rational(4, 2)).toEqual({ n: 2, d: 1 })
  })

  it('gives 0 for what is no fraction', () => {
    for (const bad of [rational(1, 0), rational(Number.NaN), rational(Infinity, 2), nearestRational(Number.NaN)]) {
      expect(bad).toEqual({ n: 0, d: 1 })
    }
  })

  it('adds, takes away and multiplies as cross-multiplied integers do', () => {
    fc.assert(
      fc.property(fraction, fraction, (a, b) => {
        const [A, B, C, D] = [a.n, a.d, b.n, b.d].map(BigInt) as [bigint, bigint, bigint, bigint]
        const same = (r: { n: number; d: number }, n: bigint, d: bigint) => BigInt(r.n) * d === n * BigInt(r.d)
        expect(same(add(a, b), A * D + C * B, B * D)).toBe(true)
        expect(same(multiply(a, b), A * C, B * D)).toBe(true)
        expect(add(add(a, b), negate(b))).toEqual(a)
      })
    )
  })

  it('orders like the exact numbers, also where doubles cannot tell them apart', () => {
    expect(compare(rational(FINE * 60 + 1, FINE), rational(60))).toBe(1)
    expect(compare(rational(FINE * 60 - 1, FINE), rational(60))).toBe(-1)
    fc.assert(
      fc.property(fraction, fraction, (a, b) => {
        const exact = BigInt(a.n) * BigInt(b.d) - BigInt(b.n) * BigInt(a.d)
        expect(compare(a, b)).toBe(exact === 0n ? 0 : exact < 0n ? -1 : 1)
        expect(equal(a, b)).toBe(exact === 0n)
      })
    )
  })

  it('stays a safe integer fraction for any numbers', () => {
    fc.assert(
      fc.property(fc.double(), fc.double(), (x, y) => {
        const results = [nearestRational(x), rational(x, y), add(nearestRational(x), nearestRational(y))]
        for (const { n, d } of results) {
          expect(Number.isSafeInteger(n) && Number.isSafeInteger(d) && d >= 1).toBe(true)
        }
      })
    )
  })

  it('keeps the nearest fraction of a beat within half a step', () => {
    fc.assert(
      fc.property(fc.double({ min: -64, max: 64, noNaN: true }), (x) => {
        expect(Math.abs(toNumber(nearestRational(x)) - x)).toBeLessThanOrEqual(0.5 / FINE)
      })
    )
  })
})
