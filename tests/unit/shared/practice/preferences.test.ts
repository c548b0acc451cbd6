import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { defaultVolume } from '@client/transport/player'
import { keyActions } from '@shared/practice/key-actions'
import {
  changedPreferences,
  defaultPreferences,
  PreferenceChange,
  Preferences,
  readPreferences
} from '@shared/practice/preferences'

const keyName = fc.constantFrom('a', 'Space', 'Shift+ArrowUp', 'Mod+Shift+z', '[', '+', 'PageDown', 'ø')
const document: fc.Arbitrary<Preferences> = fc.record(
  {
    keys: fc.dictionary(fc.constantFrom(...keyActions), fc.array(keyName, { maxLength: 3 }), { maxKeys: 3 }),
    areKeysOff: fc.boolean(),
    countIn: fc.constantFrom('none' as const, 'one bar' as const, 'two bars' as const),
    volume: fc.double({ min: 0, max: 1, noNaN: true }),
    lowFocusTopHz: fc.integer({ min: 80, max: 1000 })
  },
  { requiredKeys: [] }
)
const change: fc.Arbitrary<PreferenceChange> = fc
  .tuple(document, fc.subarray(['keys', 'volume', 'countIn'] as const))
  .map(([set, dropped]) => ({ ...set, ...Object.fromEntries(dropped.map((name) => [name, null])) }))

describe('preferences', () => {
  it('have defaults that fit their own schema, a default for every key, and the moderate volume of the player', () => {
    expect(Preferences.safeParse(defaultPreferences).success).toBe(true)
    expect(Object.keys(defaultPreferences).sort()).toEqual(Object.keys(Preferences.shape).sort())
    expect(Object.keys(PreferenceChange.shape).sort()).toEqual(Object.keys(Preferences.shape).sort())
    expect(defaultPreferences.volume).toBe(defaultVolume)
  })

  it('read back what was kept, and out of anything else only what fits', () => {
    fc.assert(
      fc.property(document, fc.object(), (kept, other) => {
        expect(readPreferences(kept)).toEqual(kept)
        expect(Preferences.safeParse(readPreferences({ ...other, volume: kept.volume ?? 'loud' })).success).toBe(true)
      }),
      { numRuns: 50 }
    )
    for (const nothing of [null, undefined, 3, 'x', []]) expect(readPreferences(nothing)).toEqual({})
  })

  it('change key by key: what a change does not name stays, null goes, the rest is the change', () => {
    fc.assert(
      fc.property(document, change, (before, made) => {
        const after = changedPreferences(before, made)
        expect(Preferences.safeParse(after).success).toBe(true)
        for (const name of Object.keys(Preferences.shape) as (keyof Preferences)[])
          expect(after[name]).toEqual(made[name] === undefined ? before[name] : (made[name] ?? undefined))
      }),
      { numRuns: 50 }
    )
  })

  it.each(['Space', 'l', '[', 'Shift+ArrowLeft', 'Mod+Shift+z', 'Mod++', '?', 'PageDown'])(
    'take %s for a key',
    (key) => {
      expect(PreferenceChange.safeParse({ keys: { loop: [key] } }).success).toBe(true)
    }
  )
  it.each(['', ' ', 'a b', 'a\u0007', 'x'.repeat(41)])('take %j for none', (key) => {
    expect(PreferenceChange.safeParse({ keys: { loop: [key] } }).success).toBe(false)
  })
})
