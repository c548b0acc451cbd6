// OpenAPI 3.1 made from the contracts: what is served is what is described.
import { z } from 'zod'
import { definitionOf } from '@shared/access/permissions'
import { allRoutes } from '@shared/contracts/registry'
import type { RouteDef } from '@shared/contracts/route'
import { ProblemBody } from '@shared/errors/problems'

type Json = Record<string, unknown>

const schemaOf = (schema: z.ZodType): Json => {
  // JSON Schema 2020-12 is the dialect of OpenAPI 3.1.
  const { $schema: _, ...rest } = z.toJSONSchema(schema, {
    target: 'draft-2020-12',
    io: 'input',
    unrepresentable: 'any'
  }) as Json
  return rest
}
const parametersOf = (where: 'path' | 'query', schema: z.ZodType): Json[] => {
  const { properties = {}, required = [] } = schemaOf(schema) as {
    properties?: Record<string, Json>
    required?: string[]
  }
  return Object.entries(properties).map(([name, property]) => ({
    name,
    in: where,
    required: where === 'path' || required.includes(name),
    schema: property
  }))
}
const bodyOf = (def: RouteDef): Json | undefined => {
  if (def.kind === 'raw') return { content: { 'application/octet-stream': {} }, required: true }
  const schema = schemaOf(def.body) as { properties?: Json; required?: string[] }
  if (def.kind === 'upload' && def.fileField) {
    const properties = { ...schema.properties, [def.fileField]: { contentMediaType: 'application/octet-stream' } }
    return { content: { 'multipart/form-data': { schema: { ...schema, properties } } }, required: true }
  }
  if (def.method === 'GET' || Object.keys(schema.properties ?? {}).length === 0) return undefined
  return { content: { 'application/json': { schema } }, required: true }
}
const answerOf = (def: RouteDef): Json =>
  def.kind === 'stream' ? { '*/*': {} } : { 'application/json': { schema: schemaOf(def.response) } }

const operationOf = (name: string, def: RouteDef): Json => {
  const { grant } = definitionOf(def.access)
  const body = bodyOf(def)
  const isOpen = (grant as readonly string[]).includes('anonymous')
  return {
    operationId: name,
    summary: def.summary,
    parameters: [...parametersOf('path', def.params), ...parametersOf('query', def.query)],
    ...(body ? { requestBody: body } : {}),
    responses: {
      [def.status]: { description: 'Done', content: answerOf(def) },
      default: {
        description: 'Why not (RFC 9457)',
        content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } }
      }
    },
    security: isOpen ? [] : [{ signIn: [] }],
    'x-permission': def.access,
    'x-granted-to': grant
  }
}

export const openApi = (cookieName: string): Json => {
  const paths: Record<string, Json> = {}
  for (const { name, def } of allRoutes()) {
    if (def.path.includes('*')) continue
    const path = def.path.replace(/:(\w+)/g, '{$1}')
    paths[path] = { ...paths[path], [def.method.toLowerCase()]: operationOf(name, def) }
  }
  return {
    openapi: '3.1.0',
    info: { title: 'Plumbline', version: '1', description: 'A study room for recorded lines.' },
    paths,
    components: {
      schemas: { Problem: schemaOf(ProblemBody) },
      securitySchemes: { signIn: { type: 'apiKey', in: 'cookie', name: cookieName } }
    }
  }
}
