// Who the tests act as: the people of the demo group, and a group of strangers beside it.
import type { Knex } from 'knex'
import { emailKey } from '@server/repositories/accounts.repo'
import { hashPassword } from '@server/services/passwords'
import { demoPassword, personaEmail, personaId } from '../../seeds/01_personas.ts'

/** mara owns the group and teaches ines and wren; jory teaches tomas and has asked pell; wren is a minor; aude listens; sten runs the server. */
export const memberKeys = ['mara', 'jory', 'ines', 'tomas', 'pell', 'wren', 'aude'] as const
/** Signed in, and in the demo group or not. `stranger` owns the group next door, `neighbour` is a member of it. */
export const personKeys = [...memberKeys, 'sten', 'stranger', 'neighbour'] as const
export type PersonKey = (typeof personKeys)[number]
/** Everybody a request can come from. */
export type AskerKey = PersonKey | 'anonymous'
export const askerKeys: readonly AskerKey[] = [...personKeys, 'anonymous']

export const otherGroup = { id: '6c1e1f5f-8b62-4e1f-8e4d-3a7f4b2d0001', name: 'Mill Lane' }
const strangers = [
  { key: 'stranger', id: '6c1e1f5f-8b62-4e1f-8e4d-3a7f4b2d0101', name: 'Odd Strand', role: 'owner' },
  { key: 'neighbour', id: '6c1e1f5f-8b62-4e1f-8e4d-3a7f4b2d0102', name: 'Nell Bower', role: 'member' }
] as const

export const emailOf = (key: PersonKey): string =>
  strangers.some((one) => one.key === key) ? `${key}@milllane.example` : personaEmail(key)
export const idOf = (key: PersonKey): string => strangers.find((one) => one.key === key)?.id ?? personaId(key)
export const password = demoPassword

export const seedStrangers = async (trx: Knex): Promise<void> => {
  const passwordHash = await hashPassword(password)
  await trx('users').insert(
    strangers.map(({ key, id, name }) => ({
      id,
      name,
      email: emailOf(key),
      email_key: emailKey(emailOf(key)),
      password_hash: passwordHash
    }))
  )
  await trx('groups').insert(otherGroup)
  await trx('memberships').insert(strangers.map(({ id, role }) => ({ group_id: otherGroup.id, user_id: id, role })))
}
