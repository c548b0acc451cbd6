import { lastAtOrBelow } from '@shared/timing/search'
import { median } from '@shared/timing/statistics'

export interface Point {
  x: number
  y: number
}

/**
 * Robust locally weighted regression (W. S. Cleveland, "Robust locally weighted regression and smoothing scatterplots",
 * Journal of the American Statistical Association 74, 1979): at each point a straight line through the points within
 * `reach` of it, weighted by the tricube of the distance and, in two more rounds, by the bisquare of the residual, so that
 * slips count nothing. Points rise by x. A reach without neighbours gives the point itself.
 */
export const localLines = (points: readonly Point[], reach: number): number[] => {
  let trust = points.map(() => 1)
  let fitted = points.map(({ y }) => y)
  for (let round = 0; round < 3; round += 1) {
    fitted = points.map((point) => lineAt(points, trust, point, reach))
    const residuals = points.map(({ y }, i) => Math.abs(y - (fitted[i] as number)))
    const scale = 6 * (median(residuals) ?? 0)
    if (scale === 0) break
    trust = residuals.map((residual) => bisquare(residual / scale))
  }
  return fitted
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
