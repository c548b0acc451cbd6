import { compareAttacks, measureNotes } from '../../../bench/stretch/attack-measures.ts'
import { addPluck, createRandom, plainPluck, steadyTone } from '../../../bench/stretch/signals.ts'
import { measureTone } from '../../../bench/stretch/tone-measures.ts'
import { describe, expect, it } from 'vitest'

const rate = 44_100

const tone = (hertz: number): Float32Array => {
  const { channels } = steadyTone({ hertz, seconds: 2, partials: 6, slope: -1 }, rate, 7)
  return channels[0] ?? new Float32Array(0)
}

const span = { from: 0.4 * rate, to: 1.6 * rate }

const attacks = [0.3, 0.75, 1.2, 1.7, 2.1, 2.6].map((sec) => ({ sec, hertz: 98 }))

/** Plucks at the places given, each with phases of its own. */
const plucks = (places: readonly number[], level = 1, attackSec = plainPluck.attackSec): Float32Array => {
  const out = new Float32Array(Math.round(3.1 * rate))
  places.forEach((startSec, i) =>
    addPluck(out, { ...plainPluck, hertz: 98, startSec, holdSec: 0.3, level, attackSec }, rate, createRandom(3 + i))
  )
  return out
}

const options = { fineSec: 0.002, noiseHz: 4500 }
const notesOf = (x: Float32Array) => measureNotes(x, rate, attacks, 1, 1, options)
const truth = attacks.map((attack) => attack.sec)
const compared = (x: Float32Array) => compareAttacks(notesOf(plucks(truth)), notesOf(x))

describe('the measures of a steady tone', () => {
  it.each([31, 98, 392])('find 3 cents too many of a tone of %d Hz', (hertz) => {
    const measured = measureTone(tone(hertz * 2 ** (3 / 1200)), rate, hertz, 6, span)
    expect(measured.cents).toBeCloseTo(3, 1)
    expect(measured.ripple).toBeLessThan(0.02)
    expect(measured.offPartials).toBeLessThan(-70)
  })

  it('find a level that swings by half a decibel to both sides', () => {
    const swinging = tone(98).map((value, i) => value * 10 ** ((0.5 * Math.sin((2 * Math.PI * 3 * i) / rate)) / 20))
    expect(measureTone(swinging, rate, 98, 6, span).ripple).toBeCloseTo(0.5, 1)
  })

  it('find energy beside the partials', () => {
    const beside = tone(98).map((value, i) => value * (1 + 0.1 * Math.sin((2 * Math.PI * 37 * i) / rate)))
    // Two side bands of a twentieth each: 2 x 0.05² of the energy.
    expect(measureTone(beside, rate, 98, 6, span).offPartials).toBeCloseTo(10 * Math.log10(0.005 / 1.005), 0)
  })
})

describe('the measures of attacks', () => {
  it('find nothing wrong with the source itself', () => {
    expect(compared(plucks(truth))).toMatchObject({ offset: 0, place95: 0, rise: 1, doubled: 0, preEcho: -80 })
  })

  it('find one note that is 6 ms late among others that are 2 ms late', () => {
    const measured = compared(plucks(truth.map((sec, i) => sec + (i === 1 ? 0.008 : 0.002))))
    expect(measured.offset).toBeCloseTo(2, 0)
    expect(measured.placeWorst).toBeCloseTo(6, 0)
  })

  it('count every attack that is heard twice', () => {
    const again = plucks(truth.slice(0, 3).map((sec) => sec + 0.045))
    const doubled = plucks(truth).map((value, i) => {
      const since = truth.findLast((sec) => sec * rate <= i)
      // The first one dies away quickly, so that the second stands out of it.
      const fall = since === undefined ? 1 : Math.exp(-(i / rate - since) * 40)
      return value * fall + (again[i] ?? 0)
    })
    expect(compared(doubled).doubled).toBe(3)
  })

  it('find attacks that rise three times as slowly', () => {
    expect(compared(plucks(truth, 1, 3 * plainPluck.attackSec)).rise).toBeGreaterThan(2)
  })

  it('find what sounds before an attack', () => {
    const early = plucks(
      truth.map((sec) => sec - 0.03),
      0.05
    )
    const sounding = plucks(truth).map((value, i) => value + (early[i] ?? 0))
    const { preEcho } = compared(sounding)
    expect(preEcho).toBeGreaterThan(-32)
    expect(preEcho).toBeLessThan(-24)
  })
})
