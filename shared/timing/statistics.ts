/** Middle value, the mean of the two middle ones for an even count; null for an empty list. */
export const median = (values: readonly number[]): number | null => {
  if (values.length === 0) return null
  const sorted = [...values].sort((a, b) => a - b)
  const middle = Math.floor(sorted.length / 2)
  const upper = sorted[middle] as number
  return sorted.length % 2 === 1 ? upper : ((sorted[middle - 1] as number) + upper) / 2
}

// Makes the median absolute deviation of normal noise its standard deviation (1 / 0.6745).
const NORMAL = 1.4826

/** Standard deviation judged from the median absolute deviation, which single slips do not touch; 0 for an empty list. */
export const robustSpread = (values: readonly number[]): number => {
  const centre = median(values) ?? 0
  return NORMAL * (median(values.map((value) => Math.abs(value - centre))) ?? 0)
}
