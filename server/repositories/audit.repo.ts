// Who did what that matters for safety (ASVS V16.2, V16.3). Rows are only ever added; no secrets, no names.
import type { Db } from '@server/db/knex'

export type AuditedAct =
  | 'sign-in'
  | 'sign-in-failed'
  | 'sign-out'
  | 'sign-up'
  | 'password-changed'
  | 'access-denied'
  | 'role-changed'
  | 'person-removed'
  | 'person-left'
  | 'invitation-made'
  | 'invitation-revoked'
  | 'invitation-accepted'
  | 'take-deleted'
  | 'tune-deleted'

export interface AuditEntry {
  what: AuditedAct
  actorId?: string | null
  objectId?: string | null
  groupId?: string | null
  address?: string | null
  requestId?: string | null
}

export const createAuditRepo = (db: Db) => ({
  add: async (entry: AuditEntry, trx: Db = db): Promise<void> => {
    await trx('audit_log').insert({
      what: entry.what,
      actor_id: entry.actorId ?? null,
      object_id: entry.objectId ?? null,
      group_id: entry.groupId ?? null,
      address: entry.address ?? null,
      request_id: entry.requestId ?? null
    })
  }
})
export type AuditRepo = ReturnType<typeof createAuditRepo>
