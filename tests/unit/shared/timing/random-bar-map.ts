// Random sound bar maps: meters incl. compound and odd ones, pick-ups, tempo from 15 to 400 felt beats a minute that drifts.
import fc from 'fast-check'
import { createBarGrid } from '@shared/timing/bar-grid'
import { readMeter } from '@shared/timing/meter'
import type { Anchor, BarMapBody, FormMark, Meter, MeterMark } from '@shared/timing/types'

export const meter = (text: string): Meter => {
  const read = readMeter(text)
  if (!read) throw new Error(`${text} is no meter`)
  return read
}

const anyMeter = fc.constantFrom('4/4', '3/4', '6/8', '12/8', '9/8', '5/4', '7/8', '2/2', '2/4', '3/8').map(meter)

const rising = (values: number[]) => [...new Set(values)].sort((a, b) => a - b)

const anyMeters: fc.Arbitrary<MeterMark[]> = fc
  .tuple(
    fc.array(fc.integer({ min: -4, max: 120 }), { maxLength: 4 }),
    fc.array(anyMeter, { minLength: 5, maxLength: 5 })
  )
  .map(([bars, meters]) => rising([...bars, 1]).map((bar, i) => ({ bar, meter: meters[i] as Meter })))

const anyMarks: fc.Arbitrary<FormMark[]> = fc
  .array(
    fc.record({
      bar: fc.integer({ min: -2, max: 150 }),
      formBar: fc.option(fc.integer({ min: 1, max: 32 })),
      newPass: fc.boolean()
    }),
    { maxLength: 4 }
  )
  .map((marks) => rising(marks.map(({ bar }) => bar)).map((bar) => marks.find((mark) => mark.bar === bar) as FormMark))

interface Step {
  pulses: number
  bpm: number
}

/** Anchors a few felt beats (or half and third ones) apart, each stretch at its own tempo, the first in bar -3 to 2. */
export const anyBarMapBody = (options: { minAnchors?: number; maxAnchors?: number } = {}): fc.Arbitrary<BarMapBody> => {
  const { minAnchors = 2, maxAnchors = 30 } = options
  return fc
    .record({
      meters: anyMeters,
      marks: anyMarks,
      startBar: fc.integer({ min: -3, max: 2 }),
      startSec: fc.double({ min: -5, max: 60, noNaN: true }),
      sixths: fc.constantFrom(6, 3, 2, 1),
      steps: fc.array(
        fc.record<Step>({
          pulses: fc.integer({ min: 1, max: 32 }),
          bpm: fc.double({ min: 15, max: 400, noNaN: true })
        }),
        { minLength: minAnchors, maxLength: maxAnchors }
      )
    })
    .map(({ meters, marks, startBar, startSec, sixths, steps }) => {
      const grid = createBarGrid(meters)
      const anchors: Anchor[] = []
      let count = grid.pulsesAt({ bar: startBar, beat: { n: 1, d: 1 } }).whole * 6
      // JSON knows no minus zero.
      let sec = startSec + 0
      for (const [i, { pulses, bpm }] of steps.entries()) {
        const whole = Math.floor(count / 6)
        const position = grid.placeAtPulses({ whole, part: reduced(count - whole * 6) })
        anchors.push({ id: `a${i}`, sec, position })
        // The last stretch of a random map may cross into another felt beat; its tempo stays in the asked range all the same.
        count += pulses * sixths
        const next = grid.placeAtPulses({ whole: Math.floor(count / 6), part: reduced(((count % 6) + 6) % 6) })
        const meterHere = grid.meterAt(position.bar)
        const wholeNotes = grid.wholeNotesAt(next) - grid.wholeNotesAt(position)
        sec += (wholeNotes * meterHere.lower * 60) / meterHere.pulse / bpm
      }
      return { anchors, meters, marks }
    })
}

const reduced = (sixth: number) =>
  [
    { n: 0, d: 1 },
    { n: 1, d: 6 },
    { n: 1, d: 3 },
    { n: 1, d: 2 },
    { n: 2, d: 3 },
    { n: 5, d: 6 }
  ][sixth] as { n: number; d: number }
