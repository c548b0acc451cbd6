import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import { realFft } from '@shared/audio/stretch/fft'

const signal = (size: number) =>
  fc.array(fc.double({ min: -1, max: 1, noNaN: true }), { minLength: size, maxLength: size })

describe('realFft', () => {
  it('agrees with the definition of the discrete transform', () => {
    fc.assert(
      fc.property(fc.constantFrom(8, 16, 64).chain(signal), (values) => {
        const size = values.length
        const [re, im] = [new Float64Array(size / 2 + 1), new Float64Array(size / 2 + 1)]
        realFft(size).forward(Float64Array.from(values), re, im)
        for (let k = 0; k <= size / 2; k++) {
          const angle = (i: number) => (-2 * Math.PI * k * i) / size
          expect(re[k]).toBeCloseTo(
            values.reduce((sum, value, i) => sum + value * Math.cos(angle(i)), 0),
            9
          )
          expect(im[k]).toBeCloseTo(
            values.reduce((sum, value, i) => sum + value * Math.sin(angle(i)), 0),
            9
          )
        }
      }),
      { numRuns: 40 }
    )
  })

  it('gives back what it was given', () => {
    fc.assert(
      fc.property(fc.constantFrom(8, 128, 512).chain(signal), (values) => {
        const size = values.length
        const [re, im, back] = [new Float64Array(size / 2 + 1), new Float64Array(size / 2 + 1), new Float64Array(size)]
        realFft(size).forward(Float64Array.from(values), re, im)
        realFft(size).inverse(re, im, back)
        values.forEach((value, i) => expect(back[i]).toBeCloseTo(value, 12))
      }),
      { numRuns: 30 }
    )
  })
})
