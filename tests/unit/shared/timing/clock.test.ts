import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { CLOCK_DRIFT, CLOCK_STAGES, createClockEstimator } from '@shared/timing/clock'

/** An exchange at a local moment with the server `offset` ahead and the given delays there and back. */
const exchange = (sentMs: number, offset: number, thereMs: number, backMs: number) => ({
  sentMs,
  serverMs: sentMs + thereMs + offset,
  receivedMs: sentMs + thereMs + backMs
})
const delay = fc.double({ min: 0, max: 400, noNaN: true })
const offset = fc.double({ min: -1e7, max: 1e7, noNaN: true })

describe('clock estimate', () => {
  it('knows nothing before the first exchange', () => {
    expect(createClockEstimator().estimate(0)).toBeNull()
    expect(createClockEstimator().serverNow(0)).toBeNull()
  })

  // The worked formula of RFC 5905, section 8, with the server answering at once: theta = ((T2-T1)+(T3-T4))/2.
  it('halves the round trip', () => {
    const clock = createClockEstimator()
    clock.add({ sentMs: 1000, serverMs: 5050, receivedMs: 1080 })
    expect(clock.estimate(1080)).toEqual({
      offsetMs: (5050 - 1000 + (5050 - 1080)) / 2,
      delayMs: 80,
      uncertaintyMs: 40
    })
    expect(clock.serverNow(2000)).toBe(6010)
  })

  it('holds the true offset within its uncertainty, however the delays are shared out', () => {
    fc.assert(
      fc.property(offset, fc.array(fc.tuple(delay, delay), { minLength: 1, maxLength: 20 }), (truth, delays) => {
        const clock = createClockEstimator()
        delays.forEach(([there, back], i) => clock.add(exchange(i * 1000, truth, there, back)))
        const estimate = clock.estimate(delays.length * 1000)
        expect(Math.abs((estimate?.offsetMs ?? NaN) - truth)).toBeLessThanOrEqual((estimate?.uncertaintyMs ?? 0) + 1e-6)
      })
    )
  })

  it('holds it too while the clocks drift apart by as much as the bound allows', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -CLOCK_DRIFT, max: CLOCK_DRIFT, noNaN: true }),
        fc.array(fc.tuple(delay, delay), { minLength: 1, maxLength: 30 }),
        (drift, delays) => {
          const clock = createClockEstimator()
          const serverAt = (localMs: number) => localMs * (1 + drift) + 5e5
          for (const [i, [there, back]] of delays.entries()) {
            const sentMs = i * 5000
            clock.add({ sentMs, serverMs: serverAt(sentMs + there), receivedMs: sentMs + there + back })
            const now = sentMs + 900
            const { offsetMs, uncertaintyMs } = clock.estimate(now) ?? { offsetMs: NaN, uncertaintyMs: 0 }
            // The drift within the exchange itself (at most 0.8 s) is not aged.
            expect(Math.abs(now + offsetMs - serverAt(now))).toBeLessThanOrEqual(uncertaintyMs + 0.02)
          }
        }
      )
    )
  })

  it('rests on the exchange with the least delay', () => {
    const clock = createClockEstimator()
    clock.add(exchange(0, 700, 20, 220))
    clock.add(exchange(1000, 700, 4, 6))
    clock.add(exchange(2000, 700, 300, 10))
    const estimate = clock.estimate(2400)
    expect(estimate?.delayMs).toBe(10)
    expect(estimate?.offsetMs).toBeCloseTo(699, 6)
  })

  it('forgets all but the last eight exchanges', () => {
    const clock = createClockEstimator()
    clock.add(exchange(0, 700, 1, 1))
    for (let i = 1; i < CLOCK_STAGES; i += 1) clock.add(exchange(i * 1000, 700, 50, 50))
    expect(clock.estimate(9000)?.delayMs).toBe(2)
    clock.add(exchange(9000, 700, 50, 50))
    expect(clock.estimate(10_000)?.delayMs).toBe(100)
  })

  it('starts anew when a clock was set', () => {
    const clock = createClockEstimator()
    for (let i = 0; i < 5; i += 1) clock.add(exchange(i * 1000, 700, 5, 5))
    clock.add(exchange(6000, 3_600_700, 90, 110))
    expect(clock.estimate(6300)?.offsetMs).toBeCloseTo(3_600_690, 6)
  })

  it('refuses what cannot be', () => {
    const clock = createClockEstimator()
    expect(clock.add({ sentMs: 10, serverMs: 0, receivedMs: 9 })).toBe(false)
    expect(clock.add({ sentMs: NaN, serverMs: 0, receivedMs: 9 })).toBe(false)
    expect(clock.estimate(20)).toBeNull()
  })
})
