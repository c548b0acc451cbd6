// The bars as counted, without any time: which meter holds where, and how far apart two places are. Lower figures are powers
// of two, so bar lengths in whole notes are exact as numbers.
import { COMMON_METER, pulsesPerBar } from '@shared/timing/meter'
import { add, multiply, nearestRational, rational, toNumber } from '@shared/timing/rational'
import { lastAtOrBelow } from '@shared/timing/search'
import type { Meter, MeterMark, Position, Rational } from '@shared/timing/types'
import type { BarIndex } from '@shared/units'

/** An exact distance kept in two parts so that fine fractions far into a take do not outgrow a safe integer; part is in [0, 1). */
export interface Count {
  whole: number
  part: Rational
}

/** Stretch of bars in one meter; the three counts are those of its first bar line, 0 at bar 1. */
interface Stretch {
  bar: BarIndex
  meter: Meter
  wholeNotes: number
  beats: number
  pulses: number
}

export interface BarGrid {
  meterAt(bar: BarIndex): Meter
  /** Whole notes from bar 1, beat 1. */
  wholeNotesAt(position: Position): number
  /** Inverse of `wholeNotesAt`; within `tolerance` whole notes of a plain fraction of a beat it is that fraction. */
  placeAtWholeNotes(wholeNotes: number, tolerance: number): Position
  /** Beats of the lower figure from bar 1, beat 1, counted through meter changes; continuous. */
  beatsAtWholeNotes(wholeNotes: number): number
  wholeNotesAtBeats(beats: number): number
  /** Felt beats from bar 1, beat 1, exactly. */
  pulsesAt(position: Position): Count
  placeAtPulses(count: Count): Position
  /** The same place with its beat inside its bar and the fraction reduced. */
  normalize(position: Position): Position
}

// Divides by 2-8, 10, 12, 14, 15 and 16: every subdivision that is played comes out as the plain fraction it is.
const PLAIN_DENOMINATOR = 1680

const ONE = rational(1)

/** Whole and rest of a fraction. */
export const splitCount = (value: Rational, onto = 0): Count => {
  const whole = Math.floor(value.n / value.d)
  return { whole: onto + whole, part: rational(value.n - whole * value.d, value.d) }
}

/** The grid of a list of meters rising by bar. The first holds backwards too; an empty list is 4/4. */
export const createBarGrid = (marks: readonly MeterMark[]): BarGrid => {
  const stretches = stretchesOf(marks)

  const stretchAt = (key: (stretch: Stretch) => number, value: number): Stretch =>
    stretches[Math.max(0, lastAtOrBelow(stretches, key, value))] as Stretch
  const ofBar = (bar: BarIndex) => stretchAt((stretch) => stretch.bar, bar)
  const ofWholeNotes = (wholeNotes: number) => stretchAt((stretch) => stretch.wholeNotes, wholeNotes)

  const wholeNotesAt = ({ bar, beat }: Position): number => {
    const start = ofBar(bar)
    const { meter } = start
    return start.wholeNotes + ((bar - start.bar) * meter.upper + (beat.n - beat.d) / beat.d) / meter.lower
  }

  const placeAtWholeNotes = (wholeNotes: number, tolerance: number): Position => {
    const start = ofWholeNotes(wholeNotes)
    const { meter } = start
    const beats = (wholeNotes - start.wholeNotes) * meter.lower
    const bars = Math.floor(beats / meter.upper)
    const inBar = beats - bars * meter.upper
    const plain = Math.round(inBar * PLAIN_DENOMINATOR)
    const isPlain = Math.abs(plain / PLAIN_DENOMINATOR - inBar) <= tolerance * meter.lower
    const offset = isPlain ? rational(plain, PLAIN_DENOMINATOR) : nearestRational(inBar)
    const carries = toNumber(offset) >= meter.upper
    return { bar: start.bar + bars + (carries ? 1 : 0), beat: carries ? ONE : add(ONE, offset) }
  }

  const normalize = ({ bar, beat }: Position): Position => {
    const start = ofBar(bar)
    const { meter } = start
    const before = start.beats + (bar - start.bar) * meter.upper
    const { whole, part } = splitCount(add(beat, rational(-1)), before)
    const target = stretchAt((stretch) => stretch.beats, whole)
    const bars = Math.floor((whole - target.beats) / target.meter.upper)
    const inBar = whole - target.beats - bars * target.meter.upper
    return { bar: target.bar + bars, beat: add(rational(inBar + 1), part) }
  }

  const pulsesAt = (position: Position): Count => {
    const { bar, beat } = normalize(position)
    const start = ofBar(bar)
    const { meter } = start
    const inBar = multiply(add(beat, rational(-1)), rational(1, meter.pulse))
    return splitCount(inBar, start.pulses + (bar - start.bar) * pulsesPerBar(meter))
  }

  const placeAtPulses = ({ whole, part }: Count): Position => {
    const start = stretchAt((stretch) => stretch.pulses, whole)
    const { meter } = start
    const bars = Math.floor((whole - start.pulses) / pulsesPerBar(meter))
    const inBar = whole - start.pulses - bars * pulsesPerBar(meter)
    return {
      bar: start.bar + bars,
      beat: add(rational(inBar * meter.pulse + 1), multiply(part, rational(meter.pulse)))
    }
  }

  return {
    meterAt: (bar) => ofBar(bar).meter,
    wholeNotesAt,
    placeAtWholeNotes,
    normalize,
    pulsesAt,
    placeAtPulses,
    beatsAtWholeNotes: (wholeNotes) => {
      const start = ofWholeNotes(wholeNotes)
      return start.beats + (wholeNotes - start.wholeNotes) * start.meter.lower
    },
    wholeNotesAtBeats: (beats) => {
      const start = stretchAt((stretch) => stretch.beats, beats)
      return start.wholeNotes + (beats - start.beats) / start.meter.lower
    }
  }
}

const stretchesOf = (marks: readonly MeterMark[]): Stretch[] => {
  const list = marks.length > 0 ? marks : [{ bar: 1, meter: COMMON_METER }]
  const stretches: Stretch[] = []
  for (const { bar, meter } of list) {
    const last = stretches.at(-1)
    stretches.push(last ? { ...countsAt(last, bar), bar, meter } : { bar, meter, wholeNotes: 0, beats: 0, pulses: 0 })
  }
  const holdsBarOne = stretches[
    Math.max(
      0,
      lastAtOrBelow(stretches, (stretch) => stretch.bar, 1)
    )
  ] as Stretch
  const origin = countsAt(holdsBarOne, 1)
  return stretches.map((stretch) => ({
    ...stretch,
    wholeNotes: stretch.wholeNotes - origin.wholeNotes,
    beats: stretch.beats - origin.beats,
    pulses: stretch.pulses - origin.pulses
  }))
}

const countsAt = (stretch: Stretch, bar: BarIndex) => {
  const beats = (bar - stretch.bar) * stretch.meter.upper
  return {
    wholeNotes: stretch.wholeNotes + beats / stretch.meter.lower,
    beats: stretch.beats + beats,
    pulses: stretch.pulses + (bar - stretch.bar) * pulsesPerBar(stretch.meter)
  }
}
