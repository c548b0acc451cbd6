import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { hatchOf, hatchPath, initialsOf } from '@client/ui/hatch'
import { exactWords, relativeWords } from '@client/ui/relative-words'

const at = (text: string) => new Date(text)

describe('relativeWords', () => {
  const now = at('2026-11-24T12:00:00')
  it.each([
    ['2026-11-24T11:59:30', 'just now'],
    ['2026-11-24T11:55:00', '5 minutes ago'],
    ['2026-11-24T10:00:00', '2 hours ago'],
    ['2026-11-23T20:00:00', 'yesterday'],
    ['2026-11-20T20:00:00', 'on Friday'],
    ['2026-11-02T20:00:00', '2 November'],
    ['2025-11-24T12:00:00', '24 November 2025'],
    ['2026-11-24T15:00:00', 'in 3 hours'],
    ['2026-11-25T20:00:00', 'tomorrow'],
    ['2026-11-30T20:00:00', '30 November']
  ])('calls %s "%s"', (then, words) => {
    expect(relativeWords(at(then), now)).toBe(words)
  })

  it('counts hours, not days, just after midnight', () => {
    expect(relativeWords(at('2026-11-23T23:30:00'), at('2026-11-24T01:00:00'))).toBe('1 hour ago')
  })

  it('has words for every pair of moments and none for a broken date', () => {
    const moments = fc.date({ min: at('2000-01-01'), max: at('2100-01-01'), noInvalidDate: true })
    fc.assert(fc.property(moments, moments, (then, other) => relativeWords(then, other).length > 0))
    expect(relativeWords(new Date(Number.NaN), now)).toBe('')
    expect(exactWords(new Date(Number.NaN))).toBe('')
  })
})

describe('hatchOf', () => {
  it('keeps the hatch of a member from one release to the next', () => {
    // The product's own choice, written down when it was made.
    expect(hatchOf('5b0f3c1e-7d24-4a86-9c11-2f6e8d90a7b3')).toEqual({
      angle: 135,
      spacing: 3.75,
      crossed: false,
      broken: false
    })
  })

  it('tells the members of a group apart: of 8 random ids at least 5 hatches differ', () => {
    const eight = fc.uniqueArray(fc.uuid(), { minLength: 8, maxLength: 8 })
    fc.assert(fc.property(eight, (ids) => new Set(ids.map((id) => JSON.stringify(hatchOf(id)))).size >= 5))
  })

  it('draws finite lines whatever the id', () => {
    fc.assert(
      fc.property(fc.string(), (id) => /^(M-?[\d.]+ -?[\d.]+L-?[\d.]+ -?[\d.]+)+$/u.test(hatchPath(hatchOf(id))))
    )
  })
})

describe('initialsOf', () => {
  it.each([
    ['Mara Kessel', 'MK'],
    ['inés barro', 'IB'],
    ['  Ada ', 'A'],
    ['Jun van der Rask', 'JR'],
    ['', ''],
    ['𝄞 Clef', '𝄞C']
  ])('takes first and last word of "%s": %s', (name, initials) => {
    expect(initialsOf(name)).toBe(initials)
  })
})
