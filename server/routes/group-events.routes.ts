import type { groupEventRoutes } from '@shared/contracts/group-events'
import type { Handlers } from '@server/http/handlers'
import type { GroupEventService } from '@server/services/group-events.service'

export const groupEventHandlers = (events: GroupEventService): Handlers<typeof groupEventRoutes> => ({
  list: ({ actor, params, query }) => events.list(actor.id, params.groupId, Number(query.after))
})
