// What a stretched case may be off by.
import type { Case } from './cases.ts'

export type Figures = Record<string, number>

export interface Limit {
  figure: string
  /** Highest absolute value, or with `isSigned` the highest. */
  most?: number
  least?: number
  isSigned?: boolean
}

const wholeLimits: Limit[] = [
  { figure: 'lengthMs', most: 1 },
  { figure: 'energyDb', most: 1 },
  { figure: 'peak', most: 0.999 }
]
/** Clicks that keep their attack are as loud and as many over a longer time: their energy over all must fall. */
const clickWholeLimits = wholeLimits.filter((limit) => limit.figure !== 'energyDb')

/** Places may be off by twice as much at quarter speed. */
const slowness = (speed: number): number => (speed <= 0.25 ? 2 : 1)

const toneLimits = (hertz: number): Limit[] => {
  const isLow = hertz < 40
  return [
    { figure: 'cents', most: 1 },
    { figure: 'ripple', most: isLow ? 1.25 : 0.15 },
    { figure: 'partialDb', most: isLow ? 1.5 : 0.5 },
    { figure: 'offPartials', most: isLow ? -18.5 : -29, isSigned: true }
  ]
}

const attackLimits = ({ speed }: Case, placeMs: number): Limit[] => [
  { figure: 'place95', most: placeMs * slowness(speed) },
  { figure: 'offset', most: 5 * slowness(speed) },
  { figure: 'doubled', most: 0 },
  { figure: 'rise', most: 1.3, isSigned: true },
  { figure: 'preEcho', most: speed < 0.5 ? -20 : -26, isSigned: true }
]

export const limitsOf = (one: Case, facts: { hertz?: number }): Limit[] => {
  const { group, speed } = one
  const isShifted = one.semitones !== 0 || one.cents !== 0
  const hertz = facts.hertz ?? 1000
  const distance = (most: number): Limit[] => (isShifted ? [] : [{ figure: 'distance', most }])
  switch (group) {
    case 'tones':
      return [...wholeLimits, ...toneLimits(hertz)]
    case 'plucks':
      return [
        ...wholeLimits,
        // A waveform shifted by resampling rises by as much slower or faster: the rise is judged unshifted.
        ...attackLimits(one, hertz < 60 ? 10 : 5).filter((limit) => !isShifted || limit.figure !== 'rise'),
        { figure: 'noiseOffset', most: 5 * slowness(speed) },
        ...distance(speed < 0.5 ? 3.1 : 3)
      ]
    case 'clicks':
      return [...clickWholeLimits, ...attackLimits(one, 2)]
    case 'mixes':
      return [...wholeLimits, { figure: 'cents', most: 1 }, { figure: 'image', most: 0.5 }, ...distance(2)]
    case 'clips':
      return [
        ...wholeLimits,
        { figure: 'place95', most: 12.5 * slowness(speed) },
        { figure: 'f1', least: speed <= 0.25 ? 0.88 : 0.93 },
        ...distance(3.4)
      ]
  }
}

export const failuresOf = (figures: Figures, limits: readonly Limit[]): string[] =>
  limits
    .filter(({ figure, most, least, isSigned }) => {
      const value = figures[figure] ?? NaN
      const size = isSigned ? value : Math.abs(value)
      return !((most === undefined || size <= most) && (least === undefined || value >= least))
    })
    .map((limit) => limit.figure)
