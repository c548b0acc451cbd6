import { z } from 'zod'
import { Uuid } from '@shared/contracts/common'
import { documentRoutes } from '@shared/contracts/documents'
import { barMapDocument } from '@shared/timing/bar-map-document'

export const barMapRoutes = documentRoutes({
  path: '/api/takes/:takeId/bar-map',
  noun: 'bar map of a take',
  params: z.object({ takeId: Uuid }),
  body: barMapDocument.body,
  operation: barMapDocument.operation,
  read: 'take:read',
  write: 'take:edit-bars',
  whole: ['setAll']
})
