import type { clipRoutes } from '@shared/contracts/clips'
import type { Handlers } from '@server/http/handlers'
import type { ClipService } from '@server/services/clips.service'

export const clipHandlers = (clips: ClipService): Handlers<typeof clipRoutes> => ({
  list: ({ actor, params }) => clips.list(actor, params.takeId),
  create: ({ actor, params, body }) => clips.create(actor, params.takeId, body),
  get: ({ params }) => clips.get(params.clipId),
  file: ({ params }) => clips.file(params.clipId),
  remove: async ({ params }) => {
    await clips.remove(params.clipId)
    return {}
  }
})
