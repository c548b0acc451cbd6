import type { tuneRoutes } from '@shared/contracts/tunes'
import type { Handlers } from '@server/http/handlers'
import type { TuneService } from '@server/services/tunes.service'

export const tuneHandlers = (tunes: TuneService): Handlers<typeof tuneRoutes> => ({
  list: ({ actor, relations, params }) => tunes.list(actor, relations, params.groupId),
  create: ({ actor, relations, params, body }) => tunes.create(actor, relations, params.groupId, body),
  get: ({ actor, relations, params }) => tunes.get(actor, relations, params.tuneId),
  update: ({ actor, relations, params, body }) => tunes.rename(actor, relations, params.tuneId, body.title),
  remove: async ({ actor, params, asker }) => {
    await tunes.remove(actor, params.tuneId, asker)
    return {}
  }
})
