// The invented people of the demo group. Tests sign in as them too.
import type { Knex } from 'knex'
import type { Role } from '@shared/contracts/common'
import { emailKey } from '@server/repositories/accounts.repo'
import { hashPassword } from '@server/services/passwords'

export const demoGroup = { id: '5b0d0f4e-7a51-4d0e-9d3c-2f6f3a1c0001', name: 'Harbour Street' }
export const demoPassword = 'harbour-street-demo'

export interface Persona {
  key: string
  id: string
  name: string
  role: Role | null
  isOperator?: true
  guardian?: string
}

const id = (n: number): string => `5b0d0f4e-7a51-4d0e-9d3c-2f6f3a1c01${String(n).padStart(2, '0')}`

export const personas: Persona[] = [
  { key: 'mara', id: id(1), name: 'Mara Kessling', role: 'owner' },
  { key: 'jory', id: id(2), name: 'Jory Rehm', role: 'teacher' },
  { key: 'ines', id: id(3), name: 'Inés Baltar', role: 'member' },
  { key: 'tomas', id: id(4), name: 'Tomás Oderinde', role: 'member' },
  { key: 'pell', id: id(5), name: 'Pell Sandvik', role: 'member' },
  { key: 'wren', id: id(6), name: 'Wren Halloway', role: 'member', guardian: 'Dana Halloway' },
  { key: 'aude', id: id(7), name: 'Aude Ferrier', role: 'listener' },
  { key: 'sten', id: id(8), name: 'Sten Ruhl', role: null, isOperator: true }
]

export const personaEmail = (key: string): string => `${key}@harbourstreet.example`
export const personaId = (key: string): string => {
  const found = personas.find((one) => one.key === key)
  if (!found) throw new Error(`nobody is called ${key}`)
  return found.id
}

/** Teacher and student, both agreed; the last one still waits for its student. */
const links = [
  { teacher: 'mara', student: 'ines', isAgreed: true },
  { teacher: 'mara', student: 'wren', isAgreed: true },
  { teacher: 'jory', student: 'tomas', isAgreed: true },
  { teacher: 'jory', student: 'pell', isAgreed: false }
]

export const seedPersonas = async (trx: Knex, now: Date): Promise<void> => {
  const passwordHash = await hashPassword(demoPassword)
  await trx('users').insert(
    personas.map((one) => ({
      id: one.id,
      name: one.name,
      email: personaEmail(one.key),
      email_key: emailKey(personaEmail(one.key)),
      password_hash: passwordHash,
      is_operator: one.isOperator === true,
      is_minor: one.guardian !== undefined,
      guardian_name: one.guardian ?? null,
      guardian_consent_at: one.guardian === undefined ? null : now
    }))
  )
  await trx('groups').insert(demoGroup)
  await trx('memberships').insert(
    personas.flatMap((one) => (one.role ? [{ group_id: demoGroup.id, user_id: one.id, role: one.role }] : []))
  )
  await trx('teacher_links').insert(
    links.map((link, index) => ({
      id: `5b0d0f4e-7a51-4d0e-9d3c-2f6f3a1c02${String(index).padStart(2, '0')}`,
      group_id: demoGroup.id,
      teacher_id: personaId(link.teacher),
      student_id: personaId(link.student),
      teacher_agreed_at: now,
      student_agreed_at: link.isAgreed ? now : null
    }))
  )
}
