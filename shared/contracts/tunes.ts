import { z } from 'zod'
import { Instant, line, Person, Uuid } from '@shared/contracts/common'
import { documentRoutes } from '@shared/contracts/documents'
import { defineRoute } from '@shared/contracts/route'
import { limits } from '@shared/limits'
import { chartDocument } from '@shared/music/chart-document'
import { chartLimits } from '@shared/music/chart-schema'

export const Tune = z.object({
  id: Uuid,
  groupId: Uuid,
  title: z.string(),
  createdBy: Person.nullable(),
  createdAt: Instant,
  takeCount: z.number().int(),
  chart: chartDocument.body,
  chartRevision: z.number().int(),
  abilities: z.array(z.string())
})
export type Tune = z.infer<typeof Tune>

const GroupParams = z.object({ groupId: Uuid })
const TuneParams = z.object({ tuneId: Uuid })

export const tuneRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/groups/:groupId/tunes',
    access: 'group:read',
    summary: 'Tunes of a group with their charts',
    params: GroupParams,
    response: z.object({ items: z.array(Tune) })
  }),
  create: defineRoute({
    method: 'POST',
    path: '/api/groups/:groupId/tunes',
    access: 'group:add-tune',
    summary: 'Add a tune, with a chart or without',
    params: GroupParams,
    body: z.object({ id: Uuid, title: line(limits.title), chart: chartDocument.body.optional() }),
    status: 201,
    response: Tune
  }),
  get: defineRoute({
    method: 'GET',
    path: '/api/tunes/:tuneId',
    access: 'tune:read',
    summary: 'One tune',
    params: TuneParams,
    response: Tune
  }),
  update: defineRoute({
    method: 'PATCH',
    path: '/api/tunes/:tuneId',
    access: 'tune:edit',
    summary: 'Rename a tune',
    params: TuneParams,
    body: z.object({ title: line(limits.title) }),
    response: Tune
  }),
  remove: defineRoute({
    method: 'DELETE',
    path: '/api/tunes/:tuneId',
    access: 'tune:delete',
    summary: 'Delete a tune; its takes stay',
    params: TuneParams
  })
}

export const chartRoutes = documentRoutes({
  path: '/api/tunes/:tuneId/chart',
  noun: 'chart of a tune',
  params: TuneParams,
  body: chartDocument.body,
  operation: chartDocument.operation,
  read: 'tune:read',
  write: 'tune:edit',
  whole: ['replaceChart', 'setMeter'],
  // A whole chart with its sections and order, and some more.
  maxChars: 4 * chartLimits.text
})
