// What can be said of taps while they come in and before they are kept.
import { createBarGrid } from '@shared/timing/bar-grid'
import type { BarMap } from '@shared/timing/bar-map'
import { beatOfPulse, pulsesPerBar } from '@shared/timing/meter'
import { rational } from '@shared/timing/rational'
import { median } from '@shared/timing/statistics'
import { learnTapLag, type TapMode } from '@shared/timing/taps'
import type { MeterMark, Position } from '@shared/timing/types'
import type { Sec } from '@shared/units'

/** Gaps that tell the tempo now. */
const RECENT_GAPS = 8

const pulsesPerStep = (mode: TapMode, meters: readonly MeterMark[]): number => {
  if (mode === 'every beat') return 1
  return mode === 'bar lines' ? pulsesPerBar(createBarGrid(meters).meterAt(1)) : 2
}

/** Felt beats a minute as the last taps have it; null with fewer than three taps. */
export const tempoOfTaps = (taps: readonly Sec[], mode: TapMode, meters: readonly MeterMark[]): number | null => {
  const recent = taps.slice(-RECENT_GAPS - 1)
  const gaps = recent.slice(1).map((tap, i) => tap - (recent[i] as Sec))
  const gap = gaps.length < 2 ? null : median(gaps)
  return gap && gap > 0 ? (60 * pulsesPerStep(mode, meters)) / gap : null
}

/** Place of the first tap as far as it is known: the nearest that fits in bars already laid, otherwise the first of bar 1. */
export const likelyStart = (
  firstSec: Sec | undefined,
  mode: TapMode,
  meters: readonly MeterMark[],
  barMap: BarMap | null
): Position => {
  const first = { bar: 1, beat: beatOfPulse(mode === '2 and 4' ? 2 : 1, createBarGrid(meters).meterAt(1)) }
  if (!barMap || firstSec === undefined) return first
  const bar = barMap.barAt(firstSec)
  const places = [bar - 1, bar, bar + 1].flatMap((each) => barMap.beatsOf(each))
  const fitting = places.filter((_, i) => {
    const inBar = i % pulsesPerBar(barMap.meterAt(bar))
    if (mode === 'every beat') return true
    if (mode === 'bar lines') return inBar === 0
    return inBar % 2 === (mode === '2 and 4' ? 1 : 0)
  })
  const nearest = fitting.reduce(
    (best, place) => (Math.abs(place.sec - firstSec) < Math.abs(best.sec - firstSec) ? place : best),
    fitting[0] ?? { sec: firstSec, position: { bar, beat: rational(1) } }
  )
  return nearest.position
}

/** How late these taps are against bars already laid; null where that cannot be told. */
export const lagAgainst = (taps: readonly Sec[], barMap: BarMap | null, mode: TapMode, rate: number): number | null => {
  const [first, last] = [taps[0], taps.at(-1)]
  if (!barMap || first === undefined || last === undefined) return null
  const bars = barMap.barsIn({ startSec: first - 1, endSec: last + 1 })
  const beats = bars.flatMap((bar) =>
    mode === 'bar lines' ? [barMap.barSec(bar)] : barMap.beatsOf(bar).map(({ sec }) => sec)
  )
  const learned = learnTapLag(taps, beats, rate)
  return learned && Math.abs(learned.lagSec) <= 0.5 ? learned.lagSec * 1000 : null
}
