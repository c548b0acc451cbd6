import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { permissions } from '@shared/access/permissions'
import { Uuid } from '@shared/contracts/common'
import { allRoutes } from '@shared/contracts/registry'
import { addressOf } from '@shared/contracts/route'

describe('the registry of routes', () => {
  it('has every method and path once, each with a permission that exists', () => {
    const addresses = allRoutes().map(({ def }) => `${def.method} ${def.path}`)
    expect(new Set(addresses).size).toBe(addresses.length)
    for (const { def } of allRoutes()) expect(Object.keys(permissions)).toContain(def.access)
  })
  it('names in params exactly what stands in the path', () => {
    for (const { name, def } of allRoutes()) {
      const inPath = [...def.path.matchAll(/:(\w+)/g)].map((match) => match[1])
      expect([name, Object.keys((def.params as z.ZodObject).shape).sort()]).toEqual([name, inPath.sort()])
    }
  })
  it('hands the access check the id of the thing that its permission is about', () => {
    for (const { name, def } of allRoutes()) {
      const { resource } = permissions[def.access]
      if (resource !== 'site')
        expect([name, Object.keys((def.params as z.ZodObject).shape)]).toEqual([
          name,
          expect.arrayContaining([`${resource}Id`])
        ])
    }
  })
})

describe('addressOf', () => {
  it('escapes what it puts in and leaves out what is not given', () => {
    expect(addressOf({ path: '/a/:x/b' }, { params: { x: 'ü/?#' }, query: { q: 'a&b=c', none: undefined } })).toBe(
      '/a/%C3%BC%2F%3F%23/b?q=a%26b%3Dc'
    )
    expect(addressOf({ path: '/a' })).toBe('/a')
  })
})

describe('ids', () => {
  it('are UUIDs in lower case', () => {
    const id = '6c1e1f5f-8b62-4e1f-8e4d-3a7f4b2d0001'
    expect([id, id.toUpperCase(), `${id} `, 'x', ''].map((one) => Uuid.safeParse(one).success)).toEqual([
      true,
      false,
      false,
      false,
      false
    ])
  })
})
