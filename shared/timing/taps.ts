// Tapping along: taps of a hand become places of the bar map.
import type { OperationFault } from '@shared/documents/document'
import { err, ok, type Result } from '@shared/result'
import { createBarGrid, type BarGrid } from '@shared/timing/bar-grid'
import { localLines } from '@shared/timing/local-line'
import { pulsesPerBar } from '@shared/timing/meter'
import { rational } from '@shared/timing/rational'
import { lastAtOrBelow } from '@shared/timing/search'
import { median, robustSpread } from '@shared/timing/statistics'
import { countSteps } from '@shared/timing/tap-steps'
import type { Anchor, MeterMark, Position } from '@shared/timing/types'
import { MIN_ANCHOR_GAP_SEC } from '@shared/timing/validate-bar-map'
import type { Sec } from '@shared/units'

export const TAP_MODES = ['every beat', '1 and 3', '2 and 4', 'bar lines'] as const
export type TapMode = (typeof TAP_MODES)[number]

export interface TapInput {
  /** Seconds of the take at which the hand fell, rising. */
  taps: readonly Sec[]
  mode: TapMode
  /** The meters of the take. */
  meters: readonly MeterMark[]
  /** Speed at which the take played while tapping: 0.5 is half speed. */
  rate: number
  /** How much later than the sound this person's taps arrive, in seconds at the wall (negative: earlier). */
  lagSec: number
  /** Place of the first tap; by default bar 1, on beat 2 for '2 and 4', else on beat 1. */
  startPosition?: Position
  /** 0 keeps every tap where it fell, 1 evens out over 16 felt beats either side; 0.5 by default. */
  smoothing?: number
  /** Makes the ids of the anchors. */
  newId: () => string
}

export interface TapFit {
  anchors: Anchor[]
  /** Standard deviation of the taps about the anchors, in seconds of the take, slips left out. */
  residualSec: number
  /** Indexes of taps that are no beat (doubled, stray) or far from where the others put theirs. */
  outliers: number[]
}

const DEFAULT_SMOOTHING = 0.5
const WIDEST_REACH_PULSES = 16
/** A tap further off than so many times the spread of the others, and than 60 ms at the wall, is a slip. */
const SLIP_SPREADS = 4
const SLIP_SEC = 0.06

/** The ways to tap that a meter allows: '1 and 3' and '2 and 4' take four felt beats in the bar. */
export const tapModes = (meters: readonly MeterMark[]): TapMode[] => {
  const isInFour = pulsesPerBar(createBarGrid(meters).meterAt(1)) === 4
  return TAP_MODES.filter((mode) => isInFour || mode === 'every beat' || mode === 'bar lines')
}

/** A wrong tap taken back: the last one goes. */
export const undoTap = (taps: readonly Sec[]): Sec[] => taps.slice(0, -1)

/**
 * Places from taps. The lag is taken off first: it passes at the wall, so in the take it is `lagSec * rate`. Then taps are
 * counted (missed and doubled ones found, see `countSteps`), then evened out against the count by robust local lines (see
 * `localLines`), which follow a drifting tempo and take most of the hand's jitter away; about 20 ms of it is usual
 * (B. H. Repp, "Sensorimotor synchronization", Psychonomic Bulletin & Review 12, 2005, figure from memory). Simulated taps
 * with 20 ms of jitter, 4 % missed and 3 % doubled leave anchors about 8 ms off (root mean square) at 120 beats a minute.
 */
export const fitTaps = (input: TapInput): Result<TapFit, OperationFault> => {
  const { taps, mode, meters, rate, lagSec, newId } = input
  if (taps.length < 2) return err({ message: 'Two taps at least are needed.' })
  if (!tapModes(meters).includes(mode)) return err({ message: `Tapping ${mode} needs four beats in the bar.` })
  if (!isRising(taps) || !(rate > 0) || !Number.isFinite(lagSec)) return err({ message: 'The taps cannot be read.' })

  const grid = createBarGrid(meters)
  const start = input.startPosition ?? { bar: 1, beat: defaultBeat(mode, grid) }
  const counted = countSteps(taps)
  const places = counted.map(({ step }) => placeOfStep(grid, start, mode, step))
  const points = counted.map(({ index }, i) => ({
    x: grid.wholeNotesAt(places[i] as Position),
    y: (taps[index] as Sec) - lagSec * rate
  }))
  const { pulse, lower } = grid.meterAt(start.bar)
  const smoothing = Math.min(1, Math.max(0, input.smoothing ?? DEFAULT_SMOOTHING))
  const fitted = rising(localLines(points, (smoothing * WIDEST_REACH_PULSES * pulse) / lower))

  const residuals = points.map(({ y }, i) => y - (fitted[i] as number))
  const limit = Math.max(SLIP_SPREADS * robustSpread(residuals), SLIP_SEC * rate)
  const isSlip = residuals.map((residual) => Math.abs(residual) > limit)
  const kept = new Set(counted.flatMap(({ index }, i) => (isSlip[i] ? [] : [index])))
  return ok({
    anchors: fitted.map((sec, i) => ({ id: newId(), sec, position: places[i] as Position })),
    residualSec: deviation(residuals.filter((_, i) => !isSlip[i])),
    outliers: taps.flatMap((_, index) => (kept.has(index) ? [] : [index]))
  })
}

export interface TapLag {
  /** Median of tap minus beat, in seconds at the wall; positive when the hand is late. */
  lagSec: number
  /** Spread of the taps about it (standard deviation judged from the median absolute deviation). */
  spreadSec: number
}

/** Fewer taps than this tell nothing about a person. */
export const LAG_TAPS = 8

/**
 * A person's lag from taps against known beats (seconds of the take, rising) while it played at `rate`; null with fewer than
 * eight taps near a beat. Each tap belongs to its nearest beat, so a lag of half a beat or more cannot be told.
 */
export const learnTapLag = (taps: readonly Sec[], beats: readonly Sec[], rate: number): TapLag | null => {
  if (!(rate > 0)) return null
  const lags = taps.flatMap((tap) => {
    const i = lastAtOrBelow(beats, (beat) => beat, tap)
    const [before, after] = [beats[i], beats[i + 1]]
    // Beyond the first and last beat it is not known which beat was meant.
    if (before === undefined || after === undefined) return []
    return [(tap - before < after - tap ? tap - before : tap - after) / rate]
  })
  const lagSec = median(lags)
  return lagSec === null || lags.length < LAG_TAPS ? null : { lagSec, spreadSec: robustSpread(lags) }
}

const isRising = (taps: readonly Sec[]): boolean =>
  taps.every((tap, i) => Number.isFinite(tap) && (i === 0 || tap > (taps[i - 1] as Sec)))

const defaultBeat = (mode: TapMode, grid: BarGrid) => rational(mode === '2 and 4' ? grid.meterAt(1).pulse + 1 : 1)

const placeOfStep = (grid: BarGrid, start: Position, mode: TapMode, step: number): Position => {
  if (mode === 'bar lines') return grid.normalize({ bar: start.bar + step, beat: start.beat })
  const { whole, part } = grid.pulsesAt(start)
  return grid.placeAtPulses({ whole: whole + step * (mode === 'every beat' ? 1 : 2), part })
}

/** Evened-out taps rise; where two slips in a row cross, the later one waits. */
const rising = (secs: number[]): number[] => {
  let last = -Infinity
  return secs.map((sec) => (last = Math.max(sec, last + 2 * MIN_ANCHOR_GAP_SEC)))
}

const deviation = (values: number[]): number =>
  values.length === 0 ? 0 : Math.sqrt(values.reduce((sum, value) => sum + value * value, 0) / values.length)
