// Subdivisions of the felt beat by name. How players count them: common practice, no source.
import { pulsesPerBar } from '@shared/timing/meter'
import { toNumber } from '@shared/timing/rational'
import type { Meter, Position } from '@shared/timing/types'
import type { BarIndex } from '@shared/units'

/** A place rounded to what can be said: felt beat from 1, the part of it that has passed, and the words for that part. */
export interface RoundedPlace {
  bar: BarIndex
  meter: Meter
  pulse: number
  fraction: number
  /** `the and of`; null on the beat. */
  word: string | null
}

interface Subdivision {
  fraction: number
  word: string | null
}

const SIMPLE: Subdivision[] = [
  { fraction: 0, word: null },
  { fraction: 1 / 4, word: 'the e of' },
  { fraction: 1 / 3, word: '2nd triplet of' },
  { fraction: 1 / 2, word: 'the and of' },
  { fraction: 2 / 3, word: '3rd triplet of' },
  { fraction: 3 / 4, word: 'the a of' },
  { fraction: 1, word: null }
]

const NOTE_NAMES: Record<number, string> = {
  1: 'whole',
  2: 'half',
  4: 'quarter',
  8: 'eighth',
  16: 'sixteenth',
  32: 'thirty-second'
}
const ORDINALS = ['1st', '2nd', '3rd']

/** In compound time the beat falls into three notes of the lower figure and their halves: `2nd eighth of 2`. */
const compound = ({ lower }: Meter): Subdivision[] => {
  const note = NOTE_NAMES[lower] ?? 'note'
  return Array.from({ length: 7 }, (_, sixth) => {
    const name = `${ORDINALS[Math.floor(sixth / 2)]} ${note} of`
    const word = sixth % 2 === 1 ? `the and of the ${name}` : name
    return { fraction: sixth / 6, word: sixth % 6 === 0 ? null : word }
  })
}

/** The nearest place that has a name; a breath before the bar line is the next bar's beat 1. */
export const roundToBeat = ({ bar, beat }: Position, meterAt: (bar: BarIndex) => Meter): RoundedPlace => {
  const meter = meterAt(bar)
  const pulses = (toNumber(beat) - 1) / meter.pulse
  const whole = Math.floor(pulses)
  const names = meter.pulse === 3 ? compound(meter) : SIMPLE
  const distance = ({ fraction }: Subdivision) => Math.abs(pulses - whole - fraction)
  const nearest = names.reduce((best, name) => (distance(name) < distance(best) ? name : best))
  if (nearest.fraction < 1) return { bar, meter, pulse: whole + 1, ...nearest }
  if (whole + 1 < pulsesPerBar(meter)) return { bar, meter, pulse: whole + 2, fraction: 0, word: null }
  return { bar: bar + 1, meter: meterAt(bar + 1), pulse: 1, fraction: 0, word: null }
}

/** `beat 3`, `the and of 3`, `2nd triplet of 2`. */
export const beatWords = ({ pulse, word }: RoundedPlace): string =>
  word === null ? `beat ${pulse}` : `${word} ${pulse}`
