import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { rational } from '@shared/timing/rational'
import type { BarMapBody } from '@shared/timing/types'
import { validateBarMap } from '@shared/timing/validate-bar-map'
import { anyBarMapBody, meter } from './random-bar-map'

const body = (overrides: Partial<BarMapBody> = {}): BarMapBody => ({
  anchors: [
    { id: 'a', sec: 1, position: { bar: 1, beat: rational(1) } },
    { id: 'b', sec: 3, position: { bar: 2, beat: rational(1) } },
    { id: 'c', sec: 5, position: { bar: 3, beat: rational(1) } }
  ],
  meters: [{ bar: 1, meter: meter('4/4') }],
  marks: [],
  ...overrides
})
const moved = (i: number, change: Partial<BarMapBody['anchors'][number]>) =>
  body({ anchors: body().anchors.map((anchor, k) => (k === i ? { ...anchor, ...change } : anchor)) })

describe('validateBarMap', () => {
  it('accepts every sound body', () => {
    fc.assert(fc.property(anyBarMapBody(), (any) => validateBarMap(any).ok))
    expect(validateBarMap({ anchors: [], meters: [], marks: [] }).ok).toBe(true)
  })

  it.each([
    ['time that goes back', moved(1, { sec: 0.5 }), /bar 2 at 0:00.5 is not after bar 1 at 0:01.0/i],
    ['two anchors at one moment', moved(1, { sec: 1 }), /is not after/],
    ['a place that goes back', moved(1, { position: { bar: 0, beat: rational(1) } }), /cannot be bar 0 after bar 1/],
    ['one place at two moments', moved(1, { position: { bar: 1, beat: rational(1) } }), /cannot be/],
    ['a beat the bar does not have', moved(1, { position: { bar: 2, beat: rational(5) } }), /no such beat/],
    ['a beat that is not reduced', moved(1, { position: { bar: 2, beat: { n: 2, d: 2 } } }), /no such beat/],
    ['a beat below 1', moved(1, { position: { bar: 2, beat: { n: 1, d: 2 } } }), /no bar and beat/],
    ['a denominator of 0', moved(1, { position: { bar: 2, beat: { n: 1, d: 0 } } }), /no bar and beat/],
    ['a broken bar', moved(1, { position: { bar: 1.5, beat: rational(1) } }), /no bar and beat/],
    ['a second that is no number', moved(1, { sec: Number.NaN }), /outside/],
    ['a tempo nobody plays', moved(1, { sec: 1.01 }), /tempo would be 24000 beats a minute/],
    ['an id twice', moved(1, { id: 'a' }), /same id/],
    [
      'two meters in a bar',
      body({ meters: [body().meters[0], body().meters[0]].flatMap((mark) => mark ?? []) }),
      /two meters/
    ],
    ['a meter that is none', body({ meters: [{ bar: 1, meter: { upper: 4, lower: 3, pulse: 1 } }] }), /not a meter/],
    [
      'a felt beat that does not fit',
      body({ meters: [{ bar: 1, meter: { upper: 4, lower: 4, pulse: 3 } }] }),
      /not a meter/
    ],
    ['a bar of the form below 1', body({ marks: [{ bar: 1, formBar: 0, newPass: true }] }), /counted from 1/],
    [
      'a bar marked twice',
      body({ marks: [1, 2].map((formBar) => ({ bar: 5, formBar, newPass: true })) }),
      /marked twice/
    ]
  ])('refuses %s', (_, bad, sentence) => {
    const result = validateBarMap(bad)
    expect(result.ok ? 'accepted' : result.error.message).toMatch(sentence)
  })
})
