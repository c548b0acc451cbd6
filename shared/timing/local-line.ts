import { lastAtOrBelow } from '@shared/timing/search'
import { median } from '@shared/timing/statistics'

export interface Point {
  x: number
  y: number
}

/** Rounds after the first trust is set; the paper finds two enough. */
const ROUNDS = 2

/**
 * Robust locally weighted regression (W. S. Cleveland, "Robust locally weighted regression and smoothing scatterplots",
 * Journal of the American Statistical Association 74, 1979): at each point a straight line through the points within
 * `reach` of it, weighted by the tricube of the distance and by the bisquare of the residual, so that slips count nothing.
 * The first residuals are from repeated-median lines (A. F. Siegel, "Robust regression using repeated medians", Biometrika
 * 69, 1982): from least squares a slip at an end would drag its neighbours into mistrust. Points rise by x. A reach
 * without neighbours gives the point itself.
 */
export const localLines = (points: readonly Point[], reach: number): number[] => {
  let fitted = points.map((point) => medianLineAt(points, point, reach))
  for (let round = 0; round < ROUNDS; round += 1) {
    const trust = trustOf(points.map(({ y }, i) => Math.abs(y - (fitted[i] as number))))
    fitted = points.map((point) => lineAt(points, trust, point, reach))
  }
  return fitted
}

const trustOf = (residuals: number[]): number[] => {
  const scale = 6 * (median(residuals) ?? 0)
  // With half the points right on their lines, those off them are still told from rounding.
  return residuals.map((residual) => bisquare(residual / Math.max(scale, 1e-9)))
}

const within = (points: readonly Point[], { x: at }: Point, reach: number): Point[] =>
  points.slice(lastAtOrBelow(points, ({ x }) => x, at - reach) + 1, firstFrom(points, at + reach))

const firstFrom = (points: readonly Point[], limit: number): number => {
  let end = lastAtOrBelow(points, ({ x }) => x, limit)
  while (end >= 0 && (points[end] as Point).x >= limit) end -= 1
  return end + 1
}

const medianLineAt = (points: readonly Point[], point: Point, reach: number): number => {
  const near = within(points, point, reach)
  if (near.length < 3) return point.y
  const slopes = near.map((a) => median(near.flatMap((b) => (a.x === b.x ? [] : [(b.y - a.y) / (b.x - a.x)]))) ?? 0)
  const slope = median(slopes) ?? 0
  return median(near.map(({ x, y }) => y - slope * (x - point.x))) ?? point.y
}

const bisquare = (u: number): number => (u < 1 ? (1 - u * u) ** 2 : 0)
const tricube = (u: number): number => (u < 1 ? (1 - u ** 3) ** 3 : 0)

const lineAt = (points: readonly Point[], trust: number[], { x: at, y: own }: Point, reach: number): number => {
  const first = lastAtOrBelow(points, ({ x }) => x, at - reach) + 1
  let [sum, sumX, sumY, sumXX, sumXY] = [0, 0, 0, 0, 0]
  for (let i = first; i < points.length; i += 1) {
    const { x, y } = points[i] as Point
    if (x - at >= reach) break
    const weight = tricube(Math.abs(x - at) / reach) * (trust[i] as number)
    // Centred on the point, so that large seconds lose no digits and the line's value is its intercept.
    sum += weight
    sumX += weight * (x - at)
    sumY += weight * (y - own)
    sumXX += weight * (x - at) ** 2
    sumXY += weight * (x - at) * (y - own)
  }
  const spread = sum * sumXX - sumX * sumX
  if (spread <= 1e-12 * sum * sum) return own
  return own + (sumXX * sumY - sumX * sumXY) / spread
}
