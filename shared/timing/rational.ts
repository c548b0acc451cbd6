// Exact fractions for places in a bar. Every function is total: what cannot be a fraction becomes 0, what no longer fits
// a safe integer becomes the nearest fraction that does.
import type { Rational } from '@shared/timing/types'

/** Denominator of places that are no plain fraction of a beat: 2^-40 of a beat is under 4 picoseconds at 15 beats a minute. */
export const FINE = 2 ** 40

/** Greatest common divisor, never negative; 0 for two zeros. */
const gcd = (a: number, b: number): number => {
  let [x, y] = [Math.abs(a), Math.abs(b)]
  while (y > 0) [x, y] = [y, x % y]
  return x
}

/** The reduced fraction n/d with d > 0. `rational(6, -4)` is -3/2. */
export const rational = (n: number, d = 1): Rational => {
  if (!Number.isFinite(n / d)) return { n: 0, d: 1 }
  if (!Number.isSafeInteger(n) || !Number.isSafeInteger(d)) return nearestRational(n / d)
  const divisor = gcd(n, d) * Math.sign(d)
  return { n: n / divisor + 0, d: d / divisor }
}

/** The nearest fraction with denominator `d`; larger numbers get a coarser one so that both figures stay safe integers. */
export const nearestRational = (value: number, d = FINE): Rational => {
  if (!Number.isFinite(value)) return { n: 0, d: 1 }
  let denominator = d
  while (denominator > 1 && Math.abs(value) * denominator > Number.MAX_SAFE_INTEGER)
    denominator = Math.ceil(denominator / 2)
  const n = Math.round(value * denominator)
  return Number.isSafeInteger(n) ? rational(n, denominator) : rational(Math.sign(value) * Number.MAX_SAFE_INTEGER)
}

/** n/d as a number. */
export const toNumber = (a: Rational): number => a.n / a.d

/** Whether n and d have no common divisor, d is above 0 and both are safe integers. */
export const isReduced = ({ n, d }: Rational): boolean =>
  Number.isSafeInteger(n) && Number.isSafeInteger(d) && d >= 1 && (d === 1 || gcd(n, d) === 1)

/** a + b, reduced. */
export const add = (a: Rational, b: Rational): Rational => {
  const common = gcd(a.d, b.d)
  return rational(a.n * (b.d / common) + b.n * (a.d / common), a.d * (b.d / common))
}

/** -a. */
export const negate = (a: Rational): Rational => ({ n: 0 - a.n, d: a.d })

/** a * b, reduced. */
export const multiply = (a: Rational, b: Rational): Rational => {
  const left = gcd(a.n, b.d) || 1
  const right = gcd(b.n, a.d) || 1
  return rational((a.n / left) * (b.n / right), (a.d / right) * (b.d / left))
}

/** Below 0, 0 or above 0 as a is less than, equal to or more than b; exact while the cross products are safe integers. */
export const compare = (a: Rational, b: Rational): number => {
  const [left, right] = [a.n * b.d, b.n * a.d]
  if (Number.isSafeInteger(left) && Number.isSafeInteger(right)) return Math.sign(left - right)
  // Beyond safe integers whole parts are still exact; the rests are compared as numbers.
  const [wholeA, wholeB] = [Math.floor(a.n / a.d), Math.floor(b.n / b.d)]
  if (wholeA !== wholeB) return Math.sign(wholeA - wholeB)
  return Math.sign((a.n - wholeA * a.d) / a.d - (b.n - wholeB * b.d) / b.d)
}

/** Whether a and b are the same number. */
export const equal = (a: Rational, b: Rational): boolean => compare(a, b) === 0
