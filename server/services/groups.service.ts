import { abilitiesOn } from '@shared/access/permissions'
import type { Relation } from '@shared/access/relations'
import type { Role } from '@shared/contracts/common'
import type { Group, GroupPerson } from '@shared/contracts/groups'
import { problem } from '@shared/errors/problems'
import type { Db } from '@server/db/knex'
import type { Actor, Asker } from '@server/http/handlers'
import type { AuditRepo } from '@server/repositories/audit.repo'
import type { EventsRepo } from '@server/repositories/events.repo'
import type { GroupsRepo, StoredGroup } from '@server/repositories/groups.repo'
import { stillAllowed } from '@server/services/still-allowed'

interface Deps {
  db: Db
  groups: GroupsRepo
  events: EventsRepo
  audit: AuditRepo
}

const toGroup = (stored: StoredGroup, role: Role): Group => ({
  ...stored,
  role,
  abilities: abilitiesOn('group', new Set<Relation>(['stranger', role]))
})

export const createGroupService = ({ db, groups, events, audit }: Deps) => {
  const get = async (actor: Actor, groupId: string): Promise<Group> => {
    const mine = (await groups.ofPerson(actor.id)).find((group) => group.id === groupId)
    if (!mine) throw problem('not-found')
    return toGroup(mine, mine.role)
  }

  const createFor = async (actor: Actor, input: { id: string; name: string }, trx: Db): Promise<void> => {
    await groups.insert(input, trx)
    await groups.addMember(input.id, actor.id, 'owner', trx)
    await events.add({ groupId: input.id, type: 'person:joined', objectId: actor.id, actorId: actor.id }, trx)
  }

  /** Refuses what would leave a group without an owner. Call with the group locked (stillAllowed does). */
  const keepAnOwner = async (groupId: string, userId: string, trx: Db): Promise<void> => {
    const owners = await groups.owners(groupId, trx)
    if (owners.length === 1 && owners[0] === userId) {
      throw problem('last-owner', { detail: 'Make somebody else an owner first.' })
    }
  }

  const takeOut = (
    actor: Actor,
    permission: 'group:leave' | 'group:set-role',
    groupId: string,
    userId: string,
    asker: Asker
  ): Promise<void> =>
    db.transaction(async (trx) => {
      await stillAllowed(actor, permission, { groupId }, groupId, trx)
      await keepAnOwner(groupId, userId, trx)
      if (!(await groups.removeMember(groupId, userId, trx))) throw problem('not-found')
      await events.add({ groupId, type: 'person:left', objectId: userId, actorId: actor.id }, trx)
      await audit.add(
        {
          what: actor.id === userId ? 'person-left' : 'person-removed',
          actorId: actor.id,
          objectId: userId,
          groupId,
          address: asker.address,
          requestId: asker.requestId
        },
        trx
      )
    })

  return {
    get,
    createFor,
    list: async (actor: Actor): Promise<{ items: Group[] }> => ({
      items: (await groups.ofPerson(actor.id)).map((group) => toGroup(group, group.role))
    }),
    create: async (actor: Actor, input: { id: string; name: string }): Promise<Group> => {
      const mine = (await groups.ofPerson(actor.id)).find((group) => group.id === input.id)
      // Sent again after a lost answer.
      if (mine?.role === 'owner') return toGroup(mine, mine.role)
      await db.transaction((trx) => createFor(actor, input, trx))
      return get(actor, input.id)
    },
    update: async (
      actor: Actor,
      groupId: string,
      change: { name?: string | undefined; isRosterShown?: boolean | undefined }
    ): Promise<Group> => {
      await db.transaction(async (trx) => {
        await stillAllowed(actor, 'group:edit', { groupId }, groupId, trx)
        await groups.update(groupId, change, trx)
        await events.add({ groupId, type: 'group:updated', objectId: groupId, actorId: actor.id }, trx)
      })
      return get(actor, groupId)
    },
    /** The owner sees everybody; others the whole roster only if it is shown, else the owner and whom they are linked or listen with. */
    people: async (actor: Actor, held: ReadonlySet<Relation>, groupId: string): Promise<{ items: GroupPerson[] }> => {
      const [group, members] = await Promise.all([groups.find(groupId), groups.members(groupId)])
      const seesAll = held.has('owner') || group?.isRosterShown === true
      const known = seesAll ? null : await groups.knownTo(actor.id, groupId)
      const seesMinors = held.has('owner') || held.has('teacher')
      return {
        items: members
          .filter((member) => known === null || known.has(member.id) || member.role === 'owner')
          .map((member) => ({
            ...member,
            // Who is under age is for those who answer for them.
            isMinor: seesMinors && member.isMinor,
            hasGuardianConsent: seesMinors && member.hasGuardianConsent
          }))
      }
    },
    setRole: async (actor: Actor, groupId: string, userId: string, role: Role, asker: Asker): Promise<GroupPerson> =>
      db.transaction(async (trx) => {
        await stillAllowed(actor, 'group:set-role', { groupId }, groupId, trx)
        if (role !== 'owner') await keepAnOwner(groupId, userId, trx)
        if (!(await groups.setRole(groupId, userId, role, trx))) throw problem('not-found')
        await events.add({ groupId, type: 'person:updated', objectId: userId, actorId: actor.id }, trx)
        await audit.add(
          {
            what: 'role-changed',
            actorId: actor.id,
            objectId: userId,
            groupId,
            address: asker.address,
            requestId: asker.requestId
          },
          trx
        )
        const member = (await groups.members(groupId, trx)).find((one) => one.id === userId)
        if (!member) throw problem('not-found')
        return member
      }),
    removePerson: (actor: Actor, groupId: string, userId: string, asker: Asker): Promise<void> =>
      takeOut(actor, 'group:set-role', groupId, userId, asker),
    leave: (actor: Actor, groupId: string, asker: Asker): Promise<void> =>
      takeOut(actor, 'group:leave', groupId, actor.id, asker)
  }
}
export type GroupService = ReturnType<typeof createGroupService>
