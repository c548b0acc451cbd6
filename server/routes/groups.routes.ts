import type { groupRoutes, invitationRoutes, linkRoutes } from '@shared/contracts/groups'
import type { RateLimits } from '@server/http/guards'
import type { Handlers } from '@server/http/handlers'
import type { GroupService } from '@server/services/groups.service'
import type { InvitationService } from '@server/services/invitations.service'
import type { LinkService } from '@server/services/links.service'

export const groupHandlers = (groups: GroupService): Handlers<typeof groupRoutes> => ({
  list: ({ actor }) => groups.list(actor),
  create: ({ actor, body }) => groups.create(actor, body),
  get: ({ actor, params }) => groups.get(actor, params.groupId),
  update: ({ actor, params, body }) => groups.update(actor, params.groupId, body),
  people: ({ actor, relations, params }) => groups.people(actor, relations, params.groupId),
  setRole: ({ actor, params, body, asker }) => groups.setRole(actor, params.groupId, params.userId, body.role, asker),
  removePerson: async ({ actor, params, asker }) => {
    await groups.removePerson(actor, params.groupId, params.userId, asker)
    return {}
  },
  leave: async ({ actor, params, asker }) => {
    await groups.leave(actor, params.groupId, asker)
    return {}
  }
})

export const invitationHandlers = (
  invitations: InvitationService,
  limits: RateLimits
): Handlers<typeof invitationRoutes> => ({
  list: ({ params }) => invitations.list(params.groupId),
  create: ({ actor, relations, params, body, asker }) =>
    invitations.create(actor, relations, params.groupId, body, asker),
  revoke: async ({ actor, params, asker }) => {
    await invitations.revoke(actor, params.invitationId, asker)
    return {}
  },
  look: async ({ body, asker }) => {
    await limits.open(asker.address)
    return invitations.look(body.token)
  },
  accept: async ({ actor, body, asker }) => {
    await limits.open(asker.address)
    return invitations.accept(actor, body.token, asker)
  }
})

export const linkHandlers = (links: LinkService): Handlers<typeof linkRoutes> => ({
  list: ({ actor, relations, params }) => links.list(actor, relations, params.groupId),
  create: ({ actor, params, body }) => links.create(actor, params.groupId, body),
  agree: ({ actor, params }) => links.agree(actor, params.linkId),
  end: async ({ actor, params }) => {
    await links.end(actor, params.linkId)
    return {}
  }
})
