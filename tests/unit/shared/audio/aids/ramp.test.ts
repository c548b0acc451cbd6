import { describe, expect, it } from 'vitest'
import { amplitudeOf, createRamp } from '@shared/audio/aids/ramp.ts'

describe('a ramp', () => {
  it('arrives at the target itself after its length, in equal steps', () => {
    const ramp = createRamp(0, 4)
    ramp.set(1)
    expect([ramp.next(), ramp.next(), ramp.next(), ramp.isSettled]).toEqual([0.25, 0.5, 0.75, false])
    expect([ramp.next(), ramp.next(), ramp.isSettled]).toEqual([1, 1, true])
  })

  it('turns round from where it is', () => {
    const ramp = createRamp(0, 4)
    ramp.set(1)
    ramp.next()
    ramp.next()
    ramp.set(0)
    expect([ramp.next(), ramp.next(), ramp.next(), ramp.next()]).toEqual([0.375, 0.25, 0.125, 0])
  })

  it('is there at once when it jumps, and does not start anew for the same target', () => {
    const ramp = createRamp(0, 4)
    ramp.set(1)
    ramp.next()
    ramp.set(1)
    ramp.next()
    expect(ramp.value).toBe(0.5)
    ramp.jump(0.3)
    expect([ramp.next(), ramp.isSettled]).toEqual([0.3, true])
  })
})

describe('a level in decibels', () => {
  it('is exactly 1 at 0 dB and a half 6.02 dB down', () => {
    expect(amplitudeOf(0)).toBe(1)
    expect(amplitudeOf(-6.0206)).toBeCloseTo(0.5, 5)
  })
})
