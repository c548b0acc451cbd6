import type { Me } from '@shared/contracts/account'
import type { Db } from '@server/db/knex'
import type { Actor } from '@server/http/handlers'

export interface Account {
  id: string
  name: string
  email: string
  passwordHash: string
  isOperator: boolean
  isDisabled: boolean
}

const columns = ['id', 'name', 'email', 'password_hash', 'is_operator', 'disabled_at'] as const
/** Addresses are compared without case and in one Unicode form. */
export const emailKey = (email: string): string => email.trim().normalize('NFKC').toLowerCase()

export const createAccountsRepo = (db: Db) => {
  const toAccount = (row: {
    id: string
    name: string
    email: string
    password_hash: string
    is_operator: boolean
    disabled_at: Date | null
  }): Account => ({
    id: row.id,
    name: row.name,
    email: row.email,
    passwordHash: row.password_hash,
    isOperator: row.is_operator,
    isDisabled: row.disabled_at !== null
  })
  return {
    byEmail: async (email: string, trx: Db = db): Promise<Account | null> => {
      const row = await trx('users')
        .where({ email_key: emailKey(email) })
        .first(...columns)
      return row ? toAccount(row) : null
    },
    byId: async (id: string): Promise<Account | null> => {
      const row = await db('users')
        .where({ id })
        .first(...columns)
      return row ? toAccount(row) : null
    },
    actor: async (id: string): Promise<Actor | null> => {
      const row = await db('users').where({ id }).whereNull('disabled_at').first('id', 'name', 'is_operator')
      return row ? { id: row.id, name: row.name, isOperator: row.is_operator } : null
    },
    me: async (id: string): Promise<Me | null> => {
      const user = await db('users').where({ id }).first('id', 'name', 'email', 'is_operator', 'tap_lag_ms')
      if (!user) return null
      const memberships = await db('memberships')
        .join('groups', 'groups.id', 'memberships.group_id')
        .where('memberships.user_id', id)
        .orderBy(['memberships.created_at', 'groups.id'])
        .select('groups.id as groupId', 'groups.name as groupName', 'memberships.role as role')
      return {
        id: user.id,
        name: user.name,
        email: user.email,
        isOperator: user.is_operator,
        tapLagMs: user.tap_lag_ms,
        memberships
      }
    },
    insert: async (row: { id: string; name: string; email: string; passwordHash: string }, trx: Db): Promise<void> => {
      await trx('users').insert({
        id: row.id,
        name: row.name,
        email: row.email.trim(),
        email_key: emailKey(row.email),
        password_hash: row.passwordHash
      })
    },
    update: async (
      id: string,
      change: { name?: string | undefined; tapLagMs?: number | null | undefined }
    ): Promise<void> => {
      await db('users')
        .where({ id })
        .update({
          ...(change.name === undefined ? {} : { name: change.name }),
          ...(change.tapLagMs === undefined ? {} : { tap_lag_ms: change.tapLagMs }),
          updated_at: db.fn.now()
        })
    },
    setPassword: async (id: string, passwordHash: string, trx: Db): Promise<void> => {
      await trx('users').where({ id }).update({ password_hash: passwordHash, updated_at: trx.fn.now() })
    },
    /** Ends every sign-in of a person except the one given. */
    endSignIns: async (userId: string, exceptSid: string | null, trx: Db): Promise<void> => {
      const own = trx('sign_ins').whereRaw(`sess #>> '{passport,user}' = ?`, [userId])
      await (exceptSid ? own.whereNot({ sid: exceptSid }) : own).delete()
    },
    /** Of these sign-ins, those that still stand and whose account is not disabled: sockets ask this. */
    livingSignIns: async (sids: string[]): Promise<Set<string>> => {
      const result = await db.raw<{ rows: { sid: string }[] }>(
        `select s.sid from sign_ins s join users u on u.id::text = s.sess #>> '{passport,user}'
         where s.sid = any(:sids::text[]) and s.expire > now() and u.disabled_at is null`,
        { sids }
      )
      return new Set(result.rows.map((row) => row.sid))
    }
  }
}
export type AccountsRepo = ReturnType<typeof createAccountsRepo>
