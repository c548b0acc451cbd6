import { createHash, randomBytes } from 'node:crypto'
import type { Relation } from '@shared/access/relations'
import type { Role } from '@shared/contracts/common'
import type { Group, Invitation } from '@shared/contracts/groups'
import { problem } from '@shared/errors/problems'
import { limits } from '@shared/limits'
import type { Db } from '@server/db/knex'
import type { Actor, Asker } from '@server/http/handlers'
import type { AuditRepo } from '@server/repositories/audit.repo'
import type { EventsRepo } from '@server/repositories/events.repo'
import type { GroupsRepo } from '@server/repositories/groups.repo'
import type { InvitationsRepo } from '@server/repositories/invitations.repo'
import type { GroupService } from '@server/services/groups.service'
import { lockGroup, stillAllowed } from '@server/services/still-allowed'

interface Deps {
  db: Db
  invitations: InvitationsRepo
  groups: GroupsRepo
  groupService: Pick<GroupService, 'get'>
  events: EventsRepo
  audit: AuditRepo
  now(): Date
}

/** 256 random bits need no slow hash (ASVS V6.5.2: at least 112). */
const hashOf = (token: string): Buffer => createHash('sha256').update(token).digest()

export const createInvitationService = ({ db, invitations, groups, groupService, events, audit, now }: Deps) => {
  const gone = () =>
    problem('gone', { detail: 'It was used already, taken back, or it is too old. Ask for a new one.' })

  /** Uses the link up and makes its bearer a member, in the caller's transaction. Who is a member already keeps their role. */
  const redeem = async (actor: Actor, token: string, asker: Asker, trx: Db): Promise<string> => {
    const found = await invitations.byToken(hashOf(token), now(), trx)
    if (!found?.isOpen) throw gone()
    await lockGroup(found.groupId, trx)
    const used = await invitations.use(hashOf(token), actor.id, now(), trx)
    if (!used) throw gone()
    const isNew = await groups.addMember(used.groupId, actor.id, used.role, trx)
    if (!isNew) throw problem('already-there', { detail: 'You are in this group already.' })
    await events.add({ groupId: used.groupId, type: 'person:joined', objectId: actor.id, actorId: actor.id }, trx)
    await audit.add(
      {
        what: 'invitation-accepted',
        actorId: actor.id,
        objectId: used.id,
        groupId: used.groupId,
        address: asker.address,
        requestId: asker.requestId
      },
      trx
    )
    return used.groupId
  }

  return {
    redeem,
    list: async (groupId: string): Promise<{ items: Invitation[] }> => ({
      items: await invitations.ofGroup(groupId, now())
    }),

    create: async (
      actor: Actor,
      held: ReadonlySet<Relation>,
      groupId: string,
      input: { id: string; role: Role; note: string },
      asker: Asker
    ): Promise<Invitation & { token: string }> => {
      const isOwner = held.has('owner')
      if (!isOwner && (input.role === 'owner' || input.role === 'teacher')) {
        throw problem('forbidden', { detail: 'Only an owner invites owners and teachers.' })
      }
      const token = randomBytes(32).toString('base64url')
      const expiresAt = new Date(now().getTime() + limits.invitationDays * 24 * 3600_000)
      await db.transaction(async (trx) => {
        await stillAllowed(actor, 'group:invite', { groupId }, groupId, trx)
        await invitations.insert({ ...input, groupId, tokenHash: hashOf(token), createdBy: actor.id, expiresAt }, trx)
        await events.add({ groupId, type: 'invitation:changed', objectId: input.id, actorId: actor.id }, trx)
        await audit.add(
          {
            what: 'invitation-made',
            actorId: actor.id,
            objectId: input.id,
            groupId,
            address: asker.address,
            requestId: asker.requestId
          },
          trx
        )
      })
      return {
        id: input.id,
        role: input.role,
        note: input.note,
        createdBy: { id: actor.id, name: actor.name },
        createdAt: now().toISOString(),
        expiresAt: expiresAt.toISOString(),
        state: 'open',
        token
      }
    },

    revoke: (actor: Actor, invitationId: string, asker: Asker): Promise<void> =>
      db.transaction(async (trx) => {
        const groupId = await invitations.groupOf(invitationId, trx)
        if (!groupId) throw problem('not-found')
        await stillAllowed(actor, 'invitation:revoke', { invitationId }, groupId, trx)
        if (!(await invitations.revoke(invitationId, now(), trx)))
          throw problem('gone', { detail: 'It has been used already.' })
        await events.add({ groupId, type: 'invitation:changed', objectId: invitationId, actorId: actor.id }, trx)
        await audit.add(
          {
            what: 'invitation-revoked',
            actorId: actor.id,
            objectId: invitationId,
            groupId,
            address: asker.address,
            requestId: asker.requestId
          },
          trx
        )
      }),

    look: async (token: string): Promise<{ groupName: string; role: Role; invitedBy: string }> => {
      const found = await invitations.byToken(hashOf(token), now())
      if (!found?.isOpen) throw gone()
      return { groupName: found.groupName, role: found.role, invitedBy: found.inviterName }
    },

    accept: async (actor: Actor, token: string, asker: Asker): Promise<Group> => {
      const groupId = await db.transaction((trx) => redeem(actor, token, asker, trx))
      return groupService.get(actor, groupId)
    }
  }
}
export type InvitationService = ReturnType<typeof createInvitationService>
