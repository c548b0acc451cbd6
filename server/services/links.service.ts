import type { Permission } from '@shared/access/permissions'
import type { Relation } from '@shared/access/relations'
import type { TeacherLink } from '@shared/contracts/groups'
import { problem } from '@shared/errors/problems'
import type { Db } from '@server/db/knex'
import type { Actor } from '@server/http/handlers'
import type { AccessRepo } from '@server/repositories/access.repo'
import type { EventsRepo } from '@server/repositories/events.repo'
import type { LinksRepo, StoredLink } from '@server/repositories/links.repo'
import { stillAllowed } from '@server/services/still-allowed'

interface Deps {
  db: Db
  links: LinksRepo
  access: Pick<AccessRepo, 'roleIn'>
  events: EventsRepo
}

export const createLinkService = ({ db, links, access, events }: Deps) => {
  const change = (
    actor: Actor,
    permission: Permission,
    linkId: string,
    work: (link: StoredLink, trx: Db) => Promise<void>
  ) =>
    db.transaction(async (trx) => {
      const before = await links.find(linkId, trx)
      if (!before) throw problem('not-found')
      await stillAllowed(actor, permission, { linkId }, before.groupId, trx)
      await work(before, trx)
      await events.add({ groupId: before.groupId, type: 'link:changed', objectId: linkId, actorId: actor.id }, trx)
      return (await links.find(linkId, trx)) ?? before
    })

  const bothSides = async (groupId: string, sides: { teacherId: string; studentId: string }, trx: Db) => {
    const teacher = await access.roleIn(sides.teacherId, groupId, trx)
    const student = await access.roleIn(sides.studentId, groupId, trx)
    if (teacher === null || student === null) throw problem('not-found')
    const fault = (path: string, message: string) => problem('invalid', { errors: [{ in: 'body', path, message }] })
    if (teacher !== 'teacher' && teacher !== 'owner')
      throw fault('teacherId', 'This person does not teach in the group.')
    if (sides.teacherId === sides.studentId) throw fault('studentId', 'A link has two people.')
  }

  return {
    list: async (actor: Actor, held: ReadonlySet<Relation>, groupId: string): Promise<{ items: TeacherLink[] }> => ({
      items: await links.ofGroup(groupId, held.has('owner') ? null : actor.id)
    }),

    create: async (
      actor: Actor,
      groupId: string,
      input: { id: string; teacherId: string; studentId: string }
    ): Promise<TeacherLink> => {
      if (actor.id !== input.teacherId && actor.id !== input.studentId) {
        throw problem('forbidden', { detail: 'A link is asked for by one of its two sides.' })
      }
      return db.transaction(async (trx) => {
        await stillAllowed(actor, 'group:link', { groupId }, groupId, trx)
        await bothSides(groupId, input, trx)
        await links.insert({ ...input, groupId, byTeacher: actor.id === input.teacherId }, trx)
        await events.add({ groupId, type: 'link:changed', objectId: input.id, actorId: actor.id }, trx)
        const made = await links.find(input.id, trx)
        if (!made) throw problem('internal')
        return made
      })
    },

    agree: (actor: Actor, linkId: string): Promise<TeacherLink> =>
      change(actor, 'link:agree', linkId, (link, trx) =>
        links.agree(linkId, link.teacher.id === actor.id ? 'teacher' : 'student', trx)
      ),

    end: async (actor: Actor, linkId: string): Promise<void> => {
      await change(actor, 'link:end', linkId, (_, trx) => links.remove(linkId, trx))
    }
  }
}
export type LinkService = ReturnType<typeof createLinkService>
