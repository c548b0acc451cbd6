import { z } from 'zod'
import { defineRoute } from '@shared/contracts/route'

export const Health = z.object({ status: z.enum(['ok', 'starting', 'failing']), database: z.boolean() })

export const siteRoutes = {
  health: defineRoute({
    method: 'GET',
    path: '/healthz',
    access: 'site:visit',
    summary: 'Is the server up',
    response: Health
  }),
  openapi: defineRoute({
    method: 'GET',
    path: '/api/openapi.json',
    access: 'site:visit',
    summary: 'This interface, described',
    kind: 'page',
    response: z.looseObject({})
  }),
  app: defineRoute({
    method: 'GET',
    path: '/{*path}',
    access: 'site:visit',
    summary: 'The application itself',
    kind: 'page'
  })
}
