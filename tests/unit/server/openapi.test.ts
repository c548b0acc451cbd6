// Structure of an OpenAPI 3.1 document, by the rules of its specification (from memory).
import { describe, expect, it } from 'vitest'
import { allRoutes } from '@shared/contracts/registry'
import { openApi } from '@server/http/openapi'

interface Parameter {
  name: string
  in: string
  required: boolean
  schema: object
}
interface Operation {
  operationId: string
  summary: string
  parameters: Parameter[]
  requestBody?: { content: Record<string, object> }
  responses: Record<string, { description: string; content?: Record<string, object> }>
  security: Record<string, string[]>[]
}
const document = JSON.parse(JSON.stringify(openApi('plumbline'))) as {
  openapi: string
  info: { title: string; version: string }
  paths: Record<string, Record<string, Operation>>
  components: { schemas: Record<string, object>; securitySchemes: Record<string, object> }
}
const operations = Object.entries(document.paths).flatMap(([path, methods]) =>
  Object.entries(methods).map(([method, operation]) => ({ path, method, operation }))
)

describe('the description of the interface', () => {
  it('is an OpenAPI 3.1 document with every served route and no other', () => {
    expect(document.openapi).toMatch(/^3\.1\.\d$/)
    expect(document.info).toMatchObject({ title: expect.any(String), version: expect.any(String) })
    const described = operations.map(({ method, path }) => `${method.toUpperCase()} ${path}`)
    const served = allRoutes()
      .filter(({ def }) => !def.path.includes('*'))
      .map(({ def }) => `${def.method} ${def.path.replace(/:(\w+)/g, '{$1}')}`)
    expect(described.sort()).toEqual(served.sort())
  })
  it('gives each operation an id of its own, answers with descriptions, and a way to fail', () => {
    expect(new Set(operations.map(({ operation }) => operation.operationId)).size).toBe(operations.length)
    for (const { operation } of operations) {
      expect(operation.summary).toBeTruthy()
      for (const [status, response] of Object.entries(operation.responses)) {
        expect(status).toMatch(/^([1-5]\d\d|default)$/)
        expect(response.description).toBeTruthy()
      }
      expect(Object.keys(operation.responses['default']?.content ?? {})).toEqual(['application/problem+json'])
    }
  })
  it('declares every parameter of a path as required, once, and none that is not there', () => {
    for (const { path, operation } of operations) {
      const inPath = [...path.matchAll(/\{(\w+)\}/g)].map((match) => match[1]).sort()
      const declared = operation.parameters.filter((one) => one.in === 'path')
      expect(declared.map(({ name }) => name).sort()).toEqual(inPath)
      expect(declared.every(({ required }) => required)).toBe(true)
      const keys = operation.parameters.map((one) => `${one.in} ${one.name}`)
      expect(new Set(keys).size).toBe(keys.length)
      for (const { schema } of operation.parameters) expect(schema).toBeTruthy()
    }
  })
  it('resolves every reference and asks for a sign-in scheme that is described', () => {
    for (const [, target] of JSON.stringify(document).matchAll(/"\$ref":"([^"]+)"/g)) {
      const found = (target ?? '')
        .slice(2)
        .split('/')
        .reduce<unknown>((at, name) => (at as Record<string, unknown> | undefined)?.[name], document)
      // Schemas that repeat themselves refer to themselves.
      if (target?.startsWith('#/components')) expect([target, found]).toEqual([target, expect.anything()])
    }
    const schemes = Object.keys(document.components.securitySchemes)
    for (const { operation } of operations)
      for (const need of operation.security) expect(schemes).toEqual(expect.arrayContaining(Object.keys(need)))
  })
  it('asks for no body where GET is meant', () => {
    for (const { method, operation } of operations) if (method === 'get') expect(operation.requestBody).toBeUndefined()
  })
})
