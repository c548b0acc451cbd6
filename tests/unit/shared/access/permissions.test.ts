// ASVS V8.2.1, V8.2.2: the access table against one written by hand (trust.md 14).
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { abilitiesOn, allows, denial, type Permission, permissions } from '@shared/access/permissions'
import { type Relation, relations } from '@shared/access/relations'
import { cell, columns, expected, permissionNames } from '../../../support/access-table.ts'

const every = Object.keys(permissions) as Permission[]

describe('the access table', () => {
  it('has a hand-written row for every permission and a column for every relation', () => {
    expect([...permissionNames].sort()).toEqual([...every].sort())
    expect([...columns].sort()).toEqual([...relations].sort())
  })

  it.each(every)('answers each single relation to %s as the row says', (permission) => {
    for (const relation of columns) {
      const said = denial(permission, new Set([relation])) ?? 'allowed'
      expect([relation, said]).toEqual([relation, cell(permission, relation)])
    }
  })

  it('answers any set of relations with the most that one of them gives', () => {
    const someone = fc.uniqueArray(fc.constantFrom(...relations.filter((one) => one !== 'anonymous')))
    fc.assert(
      fc.property(fc.constantFrom(...every), someone, (permission, held) => {
        expect(denial(permission, new Set(held)) ?? 'allowed').toBe(expected(permission, held))
      })
    )
  })

  it('never lets a right be lost by holding one relation more', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...every),
        fc.uniqueArray(fc.constantFrom(...relations)),
        fc.constantFrom(...relations),
        (permission, held, more) => {
          if (allows(permission, new Set(held))) expect(allows(permission, new Set([...held, more]))).toBe(true)
        }
      )
    )
  })

  it('tells only anonymous askers to sign in', () => {
    for (const permission of every)
      for (const relation of columns)
        expect(denial(permission, new Set([relation])) === 401).toBe(cell(permission, relation) === 401)
    for (const permission of every)
      if (cell(permission, 'anonymous') !== 'allowed') expect(cell(permission, 'anonymous')).toBe(401)
  })

  it('gives buttons exactly the permissions that the server lets through', () => {
    const held: Relation[] = ['stranger', 'member', 'hearer']
    for (const resource of ['group', 'take', 'comment', 'session'] as const) {
      const rights = every.filter(
        (permission) => permissions[permission].resource === resource && expected(permission, held) === 'allowed'
      )
      expect(abilitiesOn(resource, new Set(held)).sort()).toEqual(rights.sort())
    }
  })
})
