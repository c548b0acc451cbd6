import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { cutTries, middleOf, passesIn, placeOfFrame, type HeardPlace } from '@shared/practice/over-recording'

interface Round {
  rate: number
  restSec: number
}
/** A player: counts in, plays from startSec round after round (each at its rate), and stands still when stopped. */
interface Playing {
  startSec: number
  endSec: number
  countSec: number
  rounds: Round[]
  /** Share of the last round that is played. */
  stopShare: number
  beginClock: number
}
const timesOf = ({ startSec, endSec, countSec, rounds, stopShare, beginClock }: Playing) => {
  let clock = beginClock + countSec
  return rounds.map(({ rate, restSec }, index) => {
    const isLast = index === rounds.length - 1
    const from = clock
    const to = from + ((endSec - startSec) / rate) * (isLast ? stopShare : 1)
    clock = to + restSec
    return { from, to, rate }
  })
}
const placeAt = (playing: Playing, clock: number): number => {
  const times = timesOf(playing)
  const now = times.findLast(({ from }) => from <= clock)
  if (!now) return playing.startSec
  if (clock <= now.to) return playing.startSec + (clock - now.from) * now.rate
  return now === times.at(-1) ? playing.startSec + (now.to - now.from) * now.rate : playing.startSec
}

const anyPlaying: fc.Arbitrary<Playing> = fc
  .record({
    startSec: fc.double({ min: 0, max: 500, noNaN: true }),
    lengthSec: fc.double({ min: 3, max: 20, noNaN: true }),
    countSec: fc.double({ min: 0, max: 6, noNaN: true }),
    rounds: fc.array(
      fc.record({
        rate: fc.double({ min: 0.2, max: 1.5, noNaN: true }),
        restSec: fc.constantFrom(0, 0, 1.3)
      }),
      { minLength: 1, maxLength: 4 }
    ),
    stopShare: fc.double({ min: 0.8, max: 1, noNaN: true }),
    beginClock: fc.double({ min: 0, max: 1000, noNaN: true })
  })
  .map(({ lengthSec, ...rest }) => ({ ...rest, endSec: rest.startSec + lengthSec }))

/** Readings as a busy page takes them, 40 to 180 ms apart, from before the start to after the stop. */
const readings = (playing: Playing, gaps: number[]): HeardPlace[] => {
  const end = (timesOf(playing).at(-1)?.to ?? 0) + 0.5
  const heard: HeardPlace[] = []
  let clock = playing.beginClock
  for (let i = 0; clock < end; i += 1) {
    heard.push({ clockSec: clock, placeSec: placeAt(playing, clock) })
    clock += gaps[i % gaps.length] ?? 0.1
  }
  return heard
}
const anyGaps = fc.array(fc.double({ min: 0.04, max: 0.18, noNaN: true }), { minLength: 5, maxLength: 40 })

describe('passesIn', () => {
  it('finds every round with its rate, its start and its end', () => {
    fc.assert(
      fc.property(anyPlaying, anyGaps, (playing, gaps) => {
        const passes = passesIn(readings(playing, gaps), { startSec: playing.startSec, endSec: playing.endSec })
        const times = timesOf(playing)
        expect(passes.length).toBe(times.length)
        passes.forEach((pass, index) => {
          const time = times[index] as (typeof times)[number]
          expect(pass.rate).toBeCloseTo(time.rate, 6)
          expect(pass.placeSec).toBeCloseTo(playing.startSec, 6)
          expect(pass.startClockSec).toBeCloseTo(time.from, 5)
          // The last one ends with its last reading.
          if (index < passes.length - 1) expect(pass.endClockSec).toBeCloseTo(time.to, 5)
          else expect(time.to - pass.endClockSec).toBeLessThan(0.2)
        })
      }),
      { numRuns: 60 }
    )
  })

  it('ends a pass where the passage ends, though the take played on', () => {
    const heard = Array.from({ length: 60 }, (_, i) => ({ clockSec: i / 10, placeSec: 30 + i / 20 }))
    const [pass] = passesIn(heard, { startSec: 30, endSec: 32 })
    expect(pass?.endClockSec).toBeCloseTo(4, 9)
  })

  it('finds nothing while the take stands', () => {
    const standing = Array.from({ length: 20 }, (_, i) => ({ clockSec: i / 10, placeSec: 4 }))
    expect(passesIn(standing, { startSec: 4, endSec: null })).toEqual([])
    expect(passesIn([], { startSec: 0, endSec: null })).toEqual([])
  })
})

describe('cutTries', () => {
  it('gives every recorded frame the place that sounded when it was played, whatever the delay', () => {
    fc.assert(
      fc.property(
        anyPlaying,
        anyGaps,
        fc.double({ min: 0, max: 0.4, noNaN: true }),
        fc.double({ min: 0, max: 0.999, noNaN: true }),
        fc.constantFrom(44_100, 48_000),
        (playing, gaps, delaySec, share, sampleRate) => {
          const heard = readings(playing, gaps)
          const passes = passesIn(heard, { startSec: playing.startSec, endSec: playing.endSec })
          const zeroClockSec = playing.beginClock - 0.3
          const seconds = (heard.at(-1)?.clockSec ?? 0) - zeroClockSec + delaySec
          const frames = Math.round(seconds * sampleRate)
          const cuts = cutTries(passes, { sampleRate, frames, zeroClockSec, delaySec })
          const times = timesOf(playing)
          expect(cuts.length).toBe(times.filter(({ from, to }) => to - from >= 1.2).length)
          cuts.forEach((cut, index) => {
            const { from, to } = times[index] as (typeof times)[number]
            const clock = from + share * (to - from)
            // Played at this moment of the player's clock, a note lies so far into the recording.
            const frame = (clock - zeroClockSec + delaySec) * sampleRate
            const place = placeOfFrame(cut, frame, sampleRate)
            expect(Math.abs(place - placeAt(playing, clock))).toBeLessThan(1e-4)
            expect(cut.fromFrame).toBeGreaterThanOrEqual(0)
            expect(cut.fromFrame + cut.frames).toBeLessThanOrEqual(frames)
            expect(cut.fromFrame).toBeLessThanOrEqual((from - zeroClockSec + delaySec) * sampleRate)
          })
        }
      ),
      { numRuns: 60 }
    )
  })

  it('keeps half a second before for an early note and a second after for the last to ring', () => {
    const pass = { startClockSec: 10, endClockSec: 14, placeSec: 30, rate: 0.5 }
    const capture = { sampleRate: 1000, frames: 20_000, zeroClockSec: 5, delaySec: 0.1 }
    expect(cutTries([pass], capture)).toEqual([{ fromFrame: 4600, frames: 5500, placeSec: 29.75, rate: 0.5 }])
  })

  it('leaves out what was stopped within a second', () => {
    const pass = { startClockSec: 10, endClockSec: 10.9, placeSec: 30, rate: 1 }
    expect(cutTries([pass], { sampleRate: 1000, frames: 20_000, zeroClockSec: 5, delaySec: 0 })).toEqual([])
  })
})

describe('middleOf', () => {
  it('is not moved by a few readings that are off', () => {
    expect(middleOf([0.1, 0.11, 0.1, 9, 0.1])).toBe(0.1)
    expect(middleOf([1, 2])).toBe(1.5)
    expect(middleOf([])).toBeNaN()
  })
})
