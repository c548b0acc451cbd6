// (person, permission, ids in the request) -> the set of relations that person has to the thing.
import { definitionOf, type Permission, type Resource } from '@shared/access/permissions'
import type { Relation } from '@shared/access/relations'
import type { AccessRepo } from '@server/repositories/access.repo'
import type { Actor } from '@server/http/handlers'
import { takeRelations } from '@server/access/take-relations'

const uuid = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/i
type Ids = Record<string, unknown>

export const createRelations = (repo: AccessRepo) => {
  const stranger = (): Set<Relation> => new Set<Relation>(['stranger'])

  const group = async (userId: string, groupId: string): Promise<Set<Relation>> => {
    const role = await repo.roleIn(userId, groupId)
    return role ? stranger().add(role) : stranger()
  }
  const take = async (userId: string, takeId: string): Promise<Set<Relation>> => {
    const standing = await repo.takeStanding(userId, takeId)
    return standing ? takeRelations(standing) : stranger()
  }
  /** The relations to the thing around it, and 'author' where it is the person's own. */
  const within = async (around: Promise<Set<Relation>>, isOwn: boolean): Promise<Set<Relation>> => {
    const held = await around
    // Whoever lost the group or the take around it lost their own words in it too.
    return isOwn && held.size > 1 ? held.add('author') : held
  }

  const finders: Record<Exclude<Resource, 'site'>, (userId: string, id: string) => Promise<Set<Relation>>> = {
    group,
    take,
    tune: async (userId, id) => {
      const row = await repo.tune(id)
      return row ? within(group(userId, row.group_id), row.created_by === userId) : stranger()
    },
    savedLoop: async (userId, id) => {
      const row = await repo.savedLoop(id)
      return row ? heard(await within(take(userId, row.take_id), row.user_id === userId)) : stranger()
    },
    clip: async (userId, id) => {
      const row = await repo.clip(id)
      return row ? heard(await within(take(userId, row.take_id), row.user_id === userId)) : stranger()
    },
    comment: async (userId, id) => {
      const row = await repo.comment(id)
      return row ? heard(await within(take(userId, row.take_id), row.author_id === userId)) : stranger()
    },
    reply: async (userId, id) => {
      const row = await repo.reply(id)
      return row ? heard(await within(take(userId, row.take_id), row.author_id === userId)) : stranger()
    },
    session: async (userId, id) => {
      const row = await repo.session(id)
      return row ? heard(await within(take(userId, row.take_id), row.started_by === userId)) : stranger()
    },
    invitation: async (userId, id) => {
      const row = await repo.invitation(id)
      return row ? within(group(userId, row.group_id), row.created_by === userId) : stranger()
    },
    link: async (userId, id) => {
      const row = await repo.link(id)
      return row
        ? within(group(userId, row.group_id), row.teacher_id === userId || row.student_id === userId)
        : stranger()
    },
    recording: async (userId, id) => {
      const row = await repo.recording(id)
      return row?.uploader_id === userId ? within(group(userId, row.group_id), true) : stranger()
    }
  }

  return {
    /** `ids` are the request's params or the socket event's payload. Unknown and malformed ids give what a stranger has. */
    of: async (actor: Actor | null, permission: Permission, ids: Ids): Promise<ReadonlySet<Relation>> => {
      if (!actor) return new Set<Relation>(['anonymous'])
      const { resource } = definitionOf(permission)
      let held = stranger()
      if (resource !== 'site') {
        const id = ids[`${resource}Id`]
        if (typeof id === 'string' && uuid.test(id)) held = await finders[resource](actor.id, id)
      }
      return actor.isOperator ? held.add('operator') : held
    }
  }
}
export type Relations = ReturnType<typeof createRelations>

const hearing: Relation[] = ['takeOwner', 'takeOwnersTeacher', 'namedMember', 'namedListener', 'hearer', 'guestHearer']
/** What is said about a take is for those who may hear it: without hearing it, role and authorship count for nothing. */
const heard = (held: Set<Relation>): Set<Relation> =>
  hearing.some((relation) => held.has(relation)) ? held : new Set<Relation>(['stranger'])
