import type { Role } from '@shared/contracts/common'
import type { Invitation } from '@shared/contracts/groups'
import type { Db } from '@server/db/knex'
import { person } from '@server/repositories/people'

export interface InvitationByToken {
  id: string
  groupId: string
  groupName: string
  role: Role
  inviterName: string
  isOpen: boolean
}

export const createInvitationsRepo = (db: Db) => ({
  ofGroup: async (groupId: string, now: Date): Promise<Invitation[]> => {
    const rows = await db('invitations')
      .join('users', 'users.id', 'invitations.created_by')
      .where('invitations.group_id', groupId)
      .orderBy('invitations.created_at', 'desc')
      .limit(200)
      .select(
        'invitations.id',
        'invitations.role',
        'invitations.note',
        'invitations.created_by',
        'invitations.created_at',
        'invitations.expires_at',
        'invitations.used_at',
        'invitations.revoked_at',
        'users.name as creator_name'
      )
    return rows.map((row) => ({
      id: row.id,
      role: row.role,
      note: row.note,
      createdBy: person(row.created_by, row.creator_name),
      createdAt: row.created_at.toISOString(),
      expiresAt: row.expires_at.toISOString(),
      state: row.used_at ? 'used' : row.revoked_at ? 'revoked' : row.expires_at <= now ? 'expired' : 'open'
    }))
  },
  insert: async (
    row: {
      id: string
      groupId: string
      role: Role
      note: string
      tokenHash: Buffer
      createdBy: string
      expiresAt: Date
    },
    trx: Db
  ): Promise<void> => {
    await trx('invitations').insert({
      id: row.id,
      group_id: row.groupId,
      role: row.role,
      note: row.note,
      token_hash: row.tokenHash,
      created_by: row.createdBy,
      expires_at: row.expiresAt
    })
  },
  byToken: async (tokenHash: Buffer, now: Date, trx: Db = db): Promise<InvitationByToken | null> => {
    const row = await trx('invitations')
      .join('groups', 'groups.id', 'invitations.group_id')
      .join('users', 'users.id', 'invitations.created_by')
      .where('invitations.token_hash', tokenHash)
      .first(
        'invitations.id',
        'invitations.group_id',
        'invitations.role',
        'invitations.expires_at',
        'invitations.used_at',
        'invitations.revoked_at',
        'groups.name as group_name',
        'users.name as inviter_name'
      )
    if (!row) return null
    return {
      id: row.id,
      groupId: row.group_id,
      groupName: row.group_name,
      role: row.role,
      inviterName: row.inviter_name,
      isOpen: !row.used_at && !row.revoked_at && row.expires_at > now
    }
  },
  /** Uses a link up: one statement, so that of fifty at once exactly one gets it. */
  use: async (
    tokenHash: Buffer,
    userId: string,
    now: Date,
    trx: Db
  ): Promise<{ id: string; groupId: string; role: Role } | null> => {
    const [row] = await trx('invitations')
      .where('token_hash', tokenHash)
      .whereNull('used_at')
      .whereNull('revoked_at')
      .andWhere('expires_at', '>', now)
      .update({ used_at: now, used_by: userId })
      .returning(['id', 'group_id', 'role'])
    return row ? { id: row.id, groupId: row.group_id, role: row.role } : null
  },
  groupOf: async (id: string, trx: Db): Promise<string | null> =>
    (await trx('invitations').where({ id }).first('group_id'))?.group_id ?? null,
  /** False when it was used already. */
  revoke: async (id: string, now: Date, trx: Db): Promise<boolean> =>
    (await trx('invitations').where({ id }).whereNull('used_at').update({ revoked_at: now })) > 0
})
export type InvitationsRepo = ReturnType<typeof createInvitationsRepo>
