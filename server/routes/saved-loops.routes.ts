import type { savedLoopRoutes } from '@shared/contracts/saved-loops'
import type { Handlers } from '@server/http/handlers'
import type { SavedLoopService } from '@server/services/saved-loops.service'

export const savedLoopHandlers = (savedLoops: SavedLoopService): Handlers<typeof savedLoopRoutes> => ({
  list: ({ actor, params }) => savedLoops.list(actor, params.takeId),
  create: ({ actor, params, body }) => savedLoops.create(actor, params.takeId, body),
  change: ({ actor, params, body }) => savedLoops.change(actor, params.savedLoopId, body),
  remove: async ({ actor, params }) => {
    await savedLoops.remove(actor, params.savedLoopId)
    return {}
  }
})
