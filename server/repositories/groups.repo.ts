import type { Role } from '@shared/contracts/common'
import type { Db } from '@server/db/knex'

export interface StoredGroup {
  id: string
  name: string
  isRosterShown: boolean
  lastSeq: number
}
export interface StoredMember {
  id: string
  name: string
  role: Role
  isMinor: boolean
  hasGuardianConsent: boolean
  joinedAt: string
}

const groupColumns = ['groups.id', 'groups.name', 'groups.is_roster_shown', 'groups.last_seq'] as const
const toGroup = (row: { id: string; name: string; is_roster_shown: boolean; last_seq: number }): StoredGroup => ({
  id: row.id,
  name: row.name,
  isRosterShown: row.is_roster_shown,
  lastSeq: row.last_seq
})

export const createGroupsRepo = (db: Db) => ({
  find: async (id: string, trx: Db = db): Promise<StoredGroup | null> => {
    const row = await trx('groups')
      .where({ id })
      .first(...groupColumns)
    return row ? toGroup(row) : null
  },
  ofPerson: async (userId: string): Promise<(StoredGroup & { role: Role })[]> => {
    const rows = await db('memberships')
      .join('groups', 'groups.id', 'memberships.group_id')
      .where('memberships.user_id', userId)
      .orderBy(['memberships.created_at', 'groups.id'])
      .select(...groupColumns, 'memberships.role')
    return rows.map((row) => ({ ...toGroup(row), role: row.role }))
  },
  insert: async (row: { id: string; name: string }, trx: Db): Promise<void> => {
    await trx('groups').insert(row)
  },
  update: async (
    id: string,
    change: { name?: string | undefined; isRosterShown?: boolean | undefined },
    trx: Db
  ): Promise<void> => {
    await trx('groups')
      .where({ id })
      .update({
        ...(change.name === undefined ? {} : { name: change.name }),
        ...(change.isRosterShown === undefined ? {} : { is_roster_shown: change.isRosterShown }),
        updated_at: trx.fn.now()
      })
  },
  members: async (groupId: string, trx: Db = db): Promise<StoredMember[]> => {
    const rows = await trx('memberships')
      .join('users', 'users.id', 'memberships.user_id')
      .where('memberships.group_id', groupId)
      .orderBy(['users.name', 'users.id'])
      .select(
        'users.id',
        'users.name',
        'users.is_minor',
        'users.guardian_consent_at',
        'memberships.role',
        'memberships.created_at'
      )
    return rows.map((row) => ({
      id: row.id,
      name: row.name,
      role: row.role,
      isMinor: row.is_minor,
      hasGuardianConsent: row.guardian_consent_at !== null,
      joinedAt: row.created_at.toISOString()
    }))
  },
  /** People the asker is linked with, or has been in a listening session with. */
  knownTo: async (userId: string, groupId: string): Promise<Set<string>> => {
    const links = await db('teacher_links')
      .where('group_id', groupId)
      .andWhere((q) => q.where('teacher_id', userId).orWhere('student_id', userId))
      .select('teacher_id', 'student_id')
    const shared = await db('session_people as mine')
      .join('session_people as theirs', 'theirs.session_id', 'mine.session_id')
      .join('sessions', 'sessions.id', 'mine.session_id')
      .where({ 'mine.user_id': userId, 'sessions.group_id': groupId })
      .distinct('theirs.user_id')
    return new Set([
      userId,
      ...links.flatMap((l) => [l.teacher_id, l.student_id]),
      ...shared.map((s) => String(s.user_id))
    ])
  },
  addMember: async (groupId: string, userId: string, role: Role, trx: Db): Promise<boolean> => {
    const rows = await trx('memberships')
      .insert({ group_id: groupId, user_id: userId, role })
      .onConflict()
      .ignore()
      .returning('user_id')
    return rows.length > 0
  },
  setRole: async (groupId: string, userId: string, role: Role, trx: Db): Promise<boolean> =>
    (await trx('memberships').where({ group_id: groupId, user_id: userId }).update({ role })) > 0,
  removeMember: async (groupId: string, userId: string, trx: Db): Promise<boolean> => {
    await trx('teacher_links')
      .where('group_id', groupId)
      .andWhere((q) => q.where('teacher_id', userId).orWhere('student_id', userId))
      .delete()
    await trx('take_names')
      .where('user_id', userId)
      .whereIn('take_id', trx('takes').where('group_id', groupId).select('id'))
      .delete()
    return (await trx('memberships').where({ group_id: groupId, user_id: userId }).delete()) > 0
  },
  owners: async (groupId: string, trx: Db): Promise<string[]> => {
    const rows = await trx('memberships').where({ group_id: groupId, role: 'owner' }).select('user_id')
    return rows.map((row) => row.user_id)
  }
})
export type GroupsRepo = ReturnType<typeof createGroupsRepo>
