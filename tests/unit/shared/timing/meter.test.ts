import { describe, expect, it } from 'vitest'
import { beatOfPulse, pulseOf, pulsesPerBar, readMeter, writeMeter } from '@shared/timing/meter'
import { rational } from '@shared/timing/rational'
import { meter } from './random-bar-map'

describe('meters', () => {
  // Common practice, no source.
  it.each([
    ['4/4', 1, 4],
    ['3/4', 1, 3],
    ['2/2', 1, 2],
    ['6/8', 3, 2],
    ['9/8', 3, 3],
    ['12/8', 3, 4],
    ['3/8', 1, 3],
    ['6/4', 1, 6],
    ['7/8', 1, 7],
    ['5/4', 1, 5]
  ])('feels %s in beats of %i, %i to the bar', (text, pulse, perBar) => {
    expect(readMeter(text)?.pulse).toBe(pulse)
    expect(pulsesPerBar(meter(text))).toBe(perBar)
    expect(writeMeter(meter(text))).toBe(text)
  })

  it.each(['', '4', '4/', '0/4', '4/3', '65/4', '4/64', 'four four', '-3/4', '4/4/4', '3.5/4'])(
    'refuses %j',
    (text) => {
      expect(readMeter(text)).toBeNull()
    }
  )

  it('counts felt beats from 1', () => {
    expect(pulseOf({ bar: 1, beat: rational(4) }, meter('6/8'))).toEqual({ n: 2, d: 1 })
    expect(pulseOf({ bar: 1, beat: rational(5) }, meter('6/8'))).toEqual({ n: 7, d: 3 })
    expect(pulseOf({ bar: 1, beat: rational(7, 2) }, meter('4/4'))).toEqual({ n: 7, d: 2 })
    expect(beatOfPulse(2, meter('6/8'))).toEqual({ n: 4, d: 1 })
  })
})
