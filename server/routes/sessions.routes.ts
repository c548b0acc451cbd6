import type { sessionRoutes } from '@shared/contracts/sessions'
import type { Handlers } from '@server/http/handlers'
import type { SessionService } from '@server/services/sessions.service'

export const sessionHandlers = (sessions: SessionService): Handlers<typeof sessionRoutes> => ({
  live: ({ actor, params }) => sessions.liveOfGroup(actor, params.groupId),
  start: ({ actor, relations, params, body }) => sessions.start(actor, relations, params.takeId, body.id),
  get: ({ relations, params }) => sessions.get(params.sessionId, relations),
  end: ({ actor, relations, params }) => sessions.end(actor, relations, params.sessionId)
})
