import { add, rational } from '@shared/timing/rational'
import type { Meter, Position, Rational } from '@shared/timing/types'

export const MAX_UPPER = 64
export const LOWER_FIGURES = [1, 2, 4, 8, 16, 32] as const

/** 4/4, what a bar map without any meter is taken to be in. */
export const COMMON_METER: Meter = { upper: 4, lower: 4, pulse: 1 }

/**
 * The felt beat in units of the lower figure: three for compound meters (6/8, 9/8, 12/8, 6/16 ...), otherwise one.
 * Over a lower figure of 4 or less every beat is felt (6/4 counts six); 3/8 counts three. Common practice, no source.
 */
export const feltPulse = (upper: number, lower: number): number => (lower >= 8 && upper > 3 && upper % 3 === 0 ? 3 : 1)

/** `6/8` -> { upper: 6, lower: 8, pulse: 3 }; null for anything that is no meter (upper 1-64, lower 1 2 4 8 16 32). */
export const readMeter = (text: string): Meter | null => {
  const match = /^\s*(\d{1,2})\s*\/\s*(\d{1,2})\s*$/.exec(text)
  const [upper, lower] = [Number(match?.[1]), Number(match?.[2])]
  if (!(upper >= 1 && upper <= MAX_UPPER) || !LOWER_FIGURES.some((figure) => figure === lower)) return null
  return { upper, lower, pulse: feltPulse(upper, lower) }
}

/** `6/8`. */
export const writeMeter = (meter: Meter): string => `${meter.upper}/${meter.lower}`

/** Beats of the lower figure in a bar. */
export const beatsPerBar = (meter: Meter): number => meter.upper

/** Felt beats in a bar: 2 in 6/8, 4 in 4/4 and 12/8. */
export const pulsesPerBar = (meter: Meter): number => meter.upper / meter.pulse

/** Felt beat of a place, from 1: beat 4 of 6/8 is felt beat 2. */
export const pulseOf = (position: Position, meter: Meter): Rational =>
  add(rational(1), rational(position.beat.n - position.beat.d, position.beat.d * meter.pulse))

/** The beat of the lower figure on which a felt beat (from 1) falls: felt beat 2 of 6/8 is beat 4. */
export const beatOfPulse = (pulse: number, meter: Meter): Rational => rational((pulse - 1) * meter.pulse + 1)
