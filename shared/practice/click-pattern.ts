// Where clicks are laid along a take, and how that is said.
import { z } from 'zod'
import { ordinal } from '@shared/music/ordinal'
import type { BarMap } from '@shared/timing/bar-map'
import { beatOfPulse, COMMON_METER, pulsesPerBar } from '@shared/timing/meter'
import { add, multiply, rational, toNumber } from '@shared/timing/rational'
import type { Meter, Rational, Span } from '@shared/timing/types'
import type { BarIndex, Sec } from '@shared/units'

/** Which beats of a bar are struck; beats are the felt ones (two in 6/8). See `struckBeats` for meters other than four. */
export const ClickPattern = z.enum(['every beat', '2 and 4', '1 only', '4 only', 'off-beats', 'once in two bars'])
export type ClickPattern = z.infer<typeof ClickPattern>

/** Long to short in a swung beat: 2 is the triplet feel, 3 a dotted one. */
export const swingLimits = { min: 1, max: 4 }

export const ClickGrid = z.strictObject({
  pattern: ClickPattern,
  /** Parts of a felt beat: 1 the beat alone, 2 halves, 3 thirds, 4 quarters. */
  subdivision: z.number().int().min(1).max(4),
  /** Halves are swung: long to short. Without it they are straight. */
  swing: z.number().min(swingLimits.min).max(swingLimits.max).optional(),
  /** Bars that click, then bars that are silent, round and round from bar 1; null clicks all along. */
  silence: z
    .strictObject({ heardBars: z.number().int().min(1).max(16), silentBars: z.number().int().min(1).max(16) })
    .nullable()
})
export type ClickGrid = z.infer<typeof ClickGrid>

/** A click to come: a place in the take and how strongly it is struck (2 the bar's first, 1 a beat, 0 a subdivision). */
interface LaidClick {
  sec: Sec
  accent: 0 | 1 | 2
}

// Ends of a selection come rounded from screens and addresses.
const SAME_SEC = 1e-6

/**
 * The clicks that fall in the span (its end left out), rising. A subdivision is struck softly through every beat, the pattern
 * on top of it. Bars before bar 1 are never silent, so that a pick-up is heard.
 */
export const clicksFor = (map: BarMap, grid: ClickGrid, span: Span): LaidClick[] =>
  map
    .barsIn({ startSec: span.startSec - SAME_SEC, endSec: span.endSec })
    .filter((bar) => isHeard(bar, grid))
    .flatMap((bar) => barClicks(map, bar, grid))
    .filter(({ sec }) => sec >= span.startSec - SAME_SEC && sec < span.endSec - SAME_SEC)

/**
 * Felt beats (from 1) that a pattern strikes in a bar. Common practice, no source:
 * - `2 and 4` is the back beat: every even beat (2 of 2, 2 and 4 of 4 and 5); in three beats both weak ones, 2 and 3; a bar of
 *   one beat has only that.
 * - `4 only` is the last beat, whichever number it has.
 * - `once in two bars` is the first beat of bars 1, 3, 5 ...
 * - `off-beats` strikes between the beats, none on them.
 */
export const struckBeats = (pattern: ClickPattern, bar: BarIndex, meter: Meter): number[] => {
  const count = pulsesPerBar(meter)
  const beats = Array.from({ length: count }, (_, i) => i + 1)
  if (pattern === 'every beat') return beats
  if (pattern === '2 and 4')
    return count === 1 ? beats : beats.filter((beat) => (count === 3 ? beat > 1 : beat % 2 === 0))
  if (pattern === '4 only') return [count]
  if (pattern === '1 only') return [1]
  return pattern === 'once in two bars' && Math.abs(bar % 2) === 1 ? [1] : []
}

/** In plain words, as counted in the meter: `2 and 4, silent every fourth bar`; `2 and 3, each beat in three` in 3/4. */
export const clickWords = (grid: ClickGrid, meter: Meter = COMMON_METER): string =>
  [patternWords(grid.pattern, meter), divisionWords(grid), silenceWords(grid)]
    .filter((words) => words !== null)
    .join(', ')

const isHeard = (bar: BarIndex, { silence }: ClickGrid): boolean =>
  silence === null || bar < 1 || (bar - 1) % (silence.heardBars + silence.silentBars) < silence.heardBars

const barClicks = (map: BarMap, bar: BarIndex, grid: ClickGrid): LaidClick[] => {
  const meter = map.meterAt(bar)
  const struck = struckBeats(grid.pattern, bar, meter)
  const parts = beatParts(grid, meter)
  const off = grid.pattern === 'off-beats' ? toNumber(offBeat(grid, meter)) : null
  return Array.from({ length: pulsesPerBar(meter) }, (_, i) => i + 1).flatMap((beat) =>
    parts.flatMap((part): LaidClick[] => {
      const isBeat = part.n === 0
      const isStruck = isBeat ? struck.includes(beat) : toNumber(part) === off
      if (!isStruck && grid.subdivision === 1) return []
      const place = add(beatOfPulse(beat, meter), multiply(part, rational(meter.pulse)))
      const accent = !isStruck ? 0 : isBeat && beat === 1 ? 2 : 1
      return [{ sec: map.secAt({ bar, beat: place }), accent }]
    })
  )
}

/** Where in a felt beat something may be struck, rising from 0. */
const beatParts = (grid: ClickGrid, meter: Meter): Rational[] => {
  if (grid.subdivision <= 2) return [rational(0), offBeat(grid, meter)]
  return Array.from({ length: grid.subdivision }, (_, k) => rational(k, grid.subdivision))
}

/** Half way, or where swing puts it; among thirds, and in a compound meter left undivided, the last third. */
const offBeat = ({ subdivision, swing }: ClickGrid, meter: Meter): Rational => {
  if (subdivision === 3) return rational(2, 3)
  if (subdivision === 4) return rational(1, 2)
  const long = Math.round((swing ?? 1) * 100)
  if (swing === undefined && subdivision === 1 && meter.pulse === 3) return rational(2, 3)
  return rational(long, long + 100)
}

const patternWords = (pattern: ClickPattern, meter: Meter): string => {
  if (pattern !== '2 and 4' && pattern !== '4 only') return pattern
  const beats = struckBeats(pattern, 1, meter)
  return beats.length === 1 ? `${beats[0]} only` : `${beats.slice(0, -1).join(', ')} and ${beats.at(-1)}`
}

const divisionWords = ({ subdivision, swing }: ClickGrid): string | null => {
  if (subdivision === 1) return null
  const parts = ['two', 'three', 'four'][subdivision - 2] as string
  return `each beat in ${parts}${subdivision === 2 && swing !== undefined && swing !== 1 ? `, swung ${swing} to 1` : ''}`
}

const ORDINALS = ['second', 'third', 'fourth', 'fifth', 'sixth', 'seventh', 'eighth', 'ninth', 'tenth']

const silenceWords = ({ silence }: ClickGrid): string | null => {
  if (silence === null) return null
  const { heardBars, silentBars } = silence
  if (silentBars === 1) return `silent every ${ORDINALS[heardBars - 1] ?? ordinal(heardBars + 1)} bar`
  return `${heardBars} ${heardBars === 1 ? 'bar' : 'bars'} heard, ${silentBars} silent`
}
