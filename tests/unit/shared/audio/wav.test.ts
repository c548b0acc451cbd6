import { describe, expect, it } from 'vitest'
import { wavHeader, wavHeaderBytes, wavSamples } from '@shared/audio/wav'

describe('wavHeader', () => {
  it('says in the places of the specification what follows', () => {
    const head = Buffer.from(wavHeader(48_000, 2, 1000))
    expect(head.length).toBe(wavHeaderBytes)
    expect([head.toString('latin1', 0, 4), head.toString('latin1', 8, 16), head.toString('latin1', 36, 40)]).toEqual([
      'RIFF',
      'WAVEfmt ',
      'data'
    ])
    expect([head.readUInt32LE(4), head.readUInt32LE(40)]).toEqual([6036, 6000])
    // Format 1 (PCM), channels, rate, bytes a second, bytes a frame, bits.
    expect([20, 22, 32, 34].map((at) => head.readUInt16LE(at))).toEqual([1, 2, 6, 24])
    expect([24, 28].map((at) => head.readUInt32LE(at))).toEqual([48_000, 288_000])
  })
})

describe('wavSamples', () => {
  it('writes frame by frame what can be read back within half a step of 2^-23', () => {
    const left = Float32Array.from([0, 0.5, -0.5, 1e-6])
    const right = Float32Array.from([-1, 1.5, -2, NaN])
    const bytes = Buffer.from(wavSamples([left, right]))
    const read = Array.from({ length: 8 }, (_, n) => bytes.readIntLE(n * 3, 3) / 2 ** 23)
    const expected = [0, -1, 0.5, 1 - 2 ** -23, -0.5, -1, 1e-6, 0]
    read.forEach((value, n) => expect(Math.abs(value - (expected[n] as number))).toBeLessThanOrEqual(2 ** -24))
  })
})
