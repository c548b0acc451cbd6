import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createPlan, mergeParts, partAt, placeIn } from '@shared/audio/playback/plan'
import type { PlanCommand, PlanLoop, PlanPart, PlanSettings } from '@shared/audio/playback/plan-types'
import { startPart } from '@shared/audio/playback/start-part'

const rate = 48_000
const total = 600 * rate
const plain: PlanSettings = { rate: 1, trim: 1, ratio: 1, loop: null }
const loopOf = (startSec: number, endSec: number, more: Partial<PlanLoop> = {}): PlanLoop => ({
  startFrame: Math.round(startSec * rate),
  endFrame: Math.round(endSec * rate),
  fadeFrames: 0,
  restFrames: 0,
  ladder: null,
  ...more
})
const planAt = (sourceFrame: number, settings: Partial<PlanSettings> = {}) =>
  createPlan(total, startPart({ ...plain, ...settings }, sourceFrame))
const placeAt = (parts: readonly PlanPart[], outFrame: number) => placeIn(partAt(parts, outFrame), outFrame)
const turnsOf = (parts: readonly PlanPart[]) =>
  parts.filter((part, n) => n > 0 && part.turns === (parts[n - 1]?.turns ?? 0) + 1)

describe('a plan', () => {
  it('stands until it is told to play, then runs at its rate', () => {
    const plan = planAt(1000)
    plan.give({ kind: 'rate', rate: 0.5 }, 10)
    plan.give({ kind: 'play' }, 100)
    const parts = plan.until(10_000)
    expect(placeAt(parts, 99)).toBe(1000)
    expect(placeAt(parts, 2100)).toBe(2000)
  })

  it('turns a loop without drift over two hundred passes, whatever its length and speed', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 4800, max: 200_000 }),
        fc.double({ min: 0.2, max: 1.5, noNaN: true }),
        fc.double({ min: 0.94, max: 1.06, noNaN: true }),
        (length, speed, trim) => {
          const loop = { ...loopOf(1, 2), endFrame: rate + length }
          const plan = planAt(rate, { rate: speed, trim, loop })
          plan.give({ kind: 'play' }, 0)
          const turns = turnsOf(plan.until((length / (speed * trim)) * 200.5))
          expect(turns).toHaveLength(200)
          turns.forEach(({ outFrame, turns: count, sourceFrame }) => {
            const exact = (count * length) / (speed * trim)
            expect(outFrame - exact).toBeGreaterThan(-0.01)
            expect(outFrame - exact).toBeLessThan(1)
            // Late by a fraction of a frame, and so much further into the pass.
            expect(Math.abs(sourceFrame - rate - (outFrame - exact) * speed * trim)).toBeLessThan(0.01)
          })
        }
      ),
      { numRuns: 40 }
    )
  })

  it('passes whole frames on at full speed, so that every turn at full speed is exact', () => {
    const loop = loopOf(3, 3.7)
    const plan = planAt(loop.startFrame, { loop, rate: 0.83 })
    plan.give({ kind: 'play' }, 0)
    plan.give({ kind: 'rate', rate: 1 }, 100_001)
    const parts = plan.until(100_001 + 33_600 * 50)
    const after = turnsOf(parts).filter(({ outFrame }) => outFrame > 100_001)
    after.slice(1).forEach((part, n) => expect(part.outFrame - (after[n]?.outFrame ?? 0)).toBe(33_600))
    expect(after.every(({ sourceFrame }) => sourceFrame === loop.startFrame)).toBe(true)
  })

  it('climbs the ladder from pass to pass and stays at its top', () => {
    const ladder = { from: 0.6, to: 1, step: 0.2, every: 2 }
    const loop = loopOf(1, 2, { ladder })
    const plan = planAt(rate, { loop })
    plan.give({ kind: 'play' }, 0)
    const speeds = plan.until(20 * rate).map(({ speed }) => speed)
    expect(speeds.slice(0, 7)).toEqual([0.6, 0.6, 0.8, 0.8, 1, 1, 1])
  })

  it('rests between passes as long as asked, in seconds of take, and stands at the start meanwhile', () => {
    const loop = loopOf(1, 2, { restFrames: rate })
    const plan = planAt(rate, { loop, rate: 0.5 })
    plan.give({ kind: 'play' }, 0)
    const parts = plan.until(9 * rate)
    expect(parts.map(({ mode, outFrame }) => [mode, outFrame / rate])).toEqual([
      ['playing', 0],
      ['resting', 2],
      ['playing', 4],
      ['resting', 6],
      ['playing', 8]
    ])
    expect(placeAt(parts, 3 * rate)).toBe(rate)
  })

  it('keeps rests and turns from drifting together', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 4800, max: 90_000 }),
        fc.integer({ min: 1, max: 90_000 }),
        fc.double({ min: 0.2, max: 1.5, noNaN: true }),
        (length, restFrames, speed) => {
          const loop = { ...loopOf(1, 2), endFrame: rate + length, restFrames }
          const plan = planAt(rate, { rate: speed, loop })
          plan.give({ kind: 'play' }, 0)
          const round = (length + restFrames) / speed
          const passes = plan.until(round * 100 + 10).filter(({ mode, turns }) => mode === 'playing' && turns > 0)
          passes.forEach(({ outFrame, turns }) => expect(Math.abs(outFrame - turns * round)).toBeLessThan(1.01))
          expect(passes.length).toBeGreaterThanOrEqual(100)
        }
      ),
      { numRuns: 30 }
    )
  })

  it('goes on at a moved end, and from the start when the place is outside now', () => {
    const plan = planAt(rate, { loop: loopOf(1, 3) })
    plan.give({ kind: 'play' }, 0)
    plan.until(10 * rate)
    plan.give({ kind: 'loop', loop: loopOf(1, 2) }, rate / 2)
    const moved = plan.until(2.2 * rate)
    expect(turnsOf(moved).map(({ outFrame }) => outFrame)).toEqual([rate, 2 * rate])
    plan.give({ kind: 'loop', loop: loopOf(5, 6) }, 2.5 * rate)
    expect(placeAt(plan.until(3 * rate), 2.5 * rate)).toBe(5 * rate)
  })

  it('climbs on when only the ends of a loop with a ladder are moved', () => {
    const ladder = { from: 0.5, to: 1, step: 0.1, every: 1 }
    const plan = planAt(rate, { loop: loopOf(1, 2, { ladder }) })
    plan.give({ kind: 'play' }, 0)
    const third = plan.until(10 * rate).find(({ pass }) => pass === 2)
    plan.give({ kind: 'loop', loop: loopOf(1, 2.5, { ladder }) }, (third?.outFrame ?? 0) + 100)
    expect(plan.until(10 * rate).filter(({ turns, speed }) => turns === 0 && speed === 0.7)).toHaveLength(1)
  })

  it('plays on beyond a loop when sought there, and stops at the end of the take', () => {
    const plan = planAt(rate, { loop: loopOf(1, 2) })
    plan.give({ kind: 'play' }, 0)
    plan.give({ kind: 'seek', sourceFrame: total - rate }, 100)
    const parts = plan.until(3 * rate)
    expect(parts.at(-1)).toMatchObject({ mode: 'stopped', outFrame: 100 + rate, sourceFrame: total })
  })

  it('counts in, then plays from the place', () => {
    const plan = planAt(5 * rate)
    plan.give({ kind: 'play', countFrames: 2 * rate, counts: [{ atFrame: -rate, accent: 2 }] }, 0)
    const parts = plan.until(4 * rate)
    expect(placeAt(parts, rate)).toBe(5 * rate)
    expect(placeAt(parts, 3 * rate)).toBe(6 * rate)
  })

  it('does away with a start that was to come when a pause is given before it', () => {
    const plan = planAt(0)
    plan.give({ kind: 'play' }, 5000)
    plan.until(10_000)
    plan.give({ kind: 'pause' }, 1000)
    expect(plan.until(10_000).every(({ mode }) => mode === 'stopped')).toBe(true)
  })

  it('is told alike however often and in whatever order its commands come', () => {
    const command: fc.Arbitrary<PlanCommand> = fc.oneof(
      fc.record({ kind: fc.constant('play' as const) }),
      fc.record({ kind: fc.constant('seek' as const), sourceFrame: fc.integer({ min: 0, max: total }) }),
      fc.record({ kind: fc.constant('rate' as const), rate: fc.double({ min: 0.2, max: 1.5, noNaN: true }) }),
      fc.record({ kind: fc.constant('ratio' as const), ratio: fc.double({ min: 0.5, max: 4, noNaN: true }) })
    )
    fc.assert(
      fc.property(fc.array(command, { maxLength: 6 }), fc.integer({ min: 1, max: 50 }), (commands, step) => {
        const ahead = planAt(0, { loop: loopOf(0, 0.5) })
        const along = planAt(0, { loop: loopOf(0, 0.5) })
        const frameOf = (n: number) => (n + 1) * 7001
        // One hears everything beforehand, the other each thing just before its moment, having looked far ahead already.
        commands.forEach((one, n) => ahead.give(one, frameOf(n)))
        let mirror: PlanPart[] = []
        for (let n = 0; n <= commands.length; n += 1) {
          for (let at = n * 7001; at < (n + 1) * 7001; at += step * 100) along.until(at + 90_000)
          const one = commands[n]
          if (one) along.give(one, frameOf(n))
          along.until(frameOf(n) + 90_000)
          const news = along.news()
          if (news) mirror = mergeParts(mirror, news, 1e9)
        }
        const end = frameOf(commands.length) + 90_000
        const [one, two] = [ahead.until(end), along.until(end)]
        for (let at = 0; at < end; at += 997) {
          expect(placeAt(two, at)).toBeCloseTo(placeAt(one, at), 6)
          expect(placeAt(mirror, at)).toBeCloseTo(placeAt(one, at), 6)
        }
      }),
      { numRuns: 40 }
    )
  })

  it('forgets what is over and changes nothing by it', () => {
    const plan = planAt(rate, { loop: loopOf(1, 1.3), rate: 0.7 })
    const kept = planAt(rate, { loop: loopOf(1, 1.3), rate: 0.7 })
    for (const one of [plan, kept]) one.give({ kind: 'play' }, 0)
    for (let at = 0; at < 20 * rate; at += 5000) {
      plan.until(at + rate)
      plan.forget(at)
      if (at === 500_000) for (const one of [plan, kept]) one.give({ kind: 'rate', rate: 0.9 }, at + 100)
    }
    expect(placeAt(plan.until(20 * rate), 20 * rate)).toBe(placeAt(kept.until(20 * rate), 20 * rate))
    expect(plan.until(20 * rate).length).toBeLessThan(20)
  })
})
