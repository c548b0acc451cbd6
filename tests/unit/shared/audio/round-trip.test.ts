import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { findRoundTrip, roundTripSec, roundTripSignal } from '@shared/audio/round-trip'

/** The same noise for the same seed (a linear congruential generator, Numerical Recipes' constants). */
const noise = (seed: number) => {
  let state = seed >>> 0
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0
    return state / 2 ** 31 - 1
  }
}

interface Room {
  rate: number
  delaySec: number
  gain?: number
  noiseLevel?: number
  /** Later copies: seconds after, share. */
  reflections?: [number, number][]
}

/** The signal as a microphone hears it, with fractions of a frame: read between frames by a windowed sinc. */
const heardIn = ({ rate, delaySec, gain = 1, noiseLevel = 0, reflections = [] }: Room, seed = 7): Float32Array => {
  const signal = roundTripSignal(rate)
  const random = noise(seed)
  const recording = Float32Array.from({ length: Math.round((roundTripSec + 0.9) * rate) }, () => noiseLevel * random())
  for (const [later, share] of [[0, 1], ...reflections] as [number, number][]) {
    const shift = (delaySec + later) * rate
    const whole = Math.floor(shift)
    const part = shift - whole
    const taps = Array.from({ length: 32 }, (_, i) => {
      const x = i - 15 - part
      const window = 0.5 + 0.5 * Math.cos((Math.PI * x) / 17)
      return x === 0 ? 1 : (Math.sin(Math.PI * x) / (Math.PI * x)) * window
    })
    signal.forEach((value, n) => {
      if (value === 0) return
      taps.forEach((tap, i) => {
        const at = n + whole + i - 15
        if (at >= 0 && at < recording.length) recording[at] = (recording[at] ?? 0) + gain * share * value * tap
      })
    })
  }
  return recording
}
const errorMs = (room: Room, seed?: number): number => {
  const found = findRoundTrip(heardIn(room, seed), room.rate)
  return found ? (found.startFrame / room.rate - room.delaySec) * 1000 : NaN
}

describe('findRoundTrip', () => {
  it('finds any delay to a hundredth of a millisecond in a quiet room, at every rate', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(44_100, 48_000, 96_000),
        fc.double({ min: 0, max: 0.6, noNaN: true }),
        (rate, delaySec) => {
          expect(Math.abs(errorMs({ rate, delaySec }))).toBeLessThan(0.01)
        }
      ),
      { numRuns: 8 }
    )
  })

  it('finds it within a quarter of a millisecond at any gain, turned upside down, in noise as loud as itself', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.003, max: 3, noNaN: true }),
        fc.boolean(),
        fc.integer({ min: 1, max: 1e6 }),
        (size, isTurned, seed) => {
          // The chirps' effective level is 0.35 / sqrt(2) times the Hann window's 0.61; the noise's is its peak / sqrt(3).
          const room = { rate: 48_000, delaySec: 0.0871, gain: isTurned ? -size : size, noiseLevel: 0.26 * size }
          expect(Math.abs(errorMs(room, seed))).toBeLessThan(0.25)
        }
      ),
      { numRuns: 8 }
    )
  })

  it('takes the direct sound, not a reflection that is as loud', () => {
    const room = { rate: 48_000, delaySec: 0.05, reflections: [[0.006, 0.95] as [number, number]], noiseLevel: 0.01 }
    expect(Math.abs(errorMs(room))).toBeLessThan(0.3)
  })

  it('finds a signal whose top was cut off, and one that lost its first chirp', () => {
    const room = { rate: 48_000, delaySec: 0.04 }
    const cut = heardIn({ ...room, gain: 6 }).map((value) => Math.max(-1, Math.min(1, value)))
    expect(Math.abs((findRoundTrip(cut, 48_000)?.startFrame ?? NaN) / 48 - 40)).toBeLessThan(0.1)
    const late = heardIn(room).fill(0, 0, 0.6 * 48_000)
    expect(Math.abs((findRoundTrip(late, 48_000)?.startFrame ?? NaN) / 48 - 40)).toBeLessThan(0.1)
  })

  it('finds nothing in silence, noise, speech-like bursts, one chirp alone or no recording', () => {
    const random = noise(3)
    const hiss = Float32Array.from({ length: 120_000 }, () => 0.3 * random())
    const bursts = hiss.map((value, n) => (n % 9000 < 3000 ? value * Math.sin(n / 10) : 0))
    const one = heardIn({ rate: 48_000, delaySec: 0.1 }).fill(0, 0.7 * 48_000)
    for (const recording of [new Float32Array(120_000), hiss, bursts, one, new Float32Array(0)])
      expect(findRoundTrip(recording, 48_000)).toBeNull()
    expect(findRoundTrip(hiss, 0)).toBeNull()
    expect(findRoundTrip(new Float32Array(120_000).fill(NaN), 48_000)).toBeNull()
  })
})

describe('roundTripSignal', () => {
  it('keeps its sound between 700 Hz and 6.6 kHz and starts and ends in silence', () => {
    const rate = 48_000
    const signal = roundTripSignal(rate)
    expect(signal.length).toBe(Math.round(roundTripSec * rate))
    const peak = signal.reduce((most, value) => Math.max(most, Math.abs(value)), 0)
    expect(peak).toBeGreaterThan(0.3)
    expect(peak).toBeLessThanOrEqual(0.35)
    expect(signal.subarray(0, 0.5 * rate).every((value) => value === 0)).toBe(true)
    // Energy at single frequencies by Goertzel's sum over the first chirp.
    const part = signal.subarray(0.5 * rate, 0.54 * rate)
    const levelAt = (hz: number): number => {
      let [re, im] = [0, 0]
      part.forEach((value, n) => {
        re += value * Math.cos((2 * Math.PI * hz * n) / rate)
        im += value * Math.sin((2 * Math.PI * hz * n) / rate)
      })
      return Math.hypot(re, im)
    }
    for (const hz of [100, 400, 8000, 12_000]) expect(levelAt(hz) / levelAt(3500)).toBeLessThan(0.02)
  })
})
