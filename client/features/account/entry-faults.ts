// What is missing in a form about an account, said before anything is sent.
import { Email } from '@shared/contracts/account'
import { limits } from '@shared/limits'
import type { FieldFault } from '@client/ui/faults'

export interface Entry {
  name?: string
  email?: string
  /** The password of an account that exists. */
  password?: string
  /** A password to be: it has a least length. */
  newPassword?: string
  groupName?: string
}

/** Paths are those of the requests; `as` gives another path to a new password. */
export const entryFaults = (entry: Entry, as: { newPassword?: string } = {}): FieldFault[] => {
  const faults: FieldFault[] = []
  const add = (path: string, message: string): void => void faults.push({ in: 'body', path, message })
  if (entry.name?.trim() === '') add('name', 'Write the name the others know you by.')
  if (entry.email !== undefined) {
    if (entry.email.trim() === '') add('email', 'Write your e-mail address.')
    else if (!Email.safeParse(entry.email.trim()).success) add('email', 'This does not read as an e-mail address.')
  }
  if (entry.password === '') add('password', 'Write your password.')
  if (entry.newPassword !== undefined) {
    const path = as.newPassword ?? 'password'
    const { length } = entry.newPassword
    if (length < limits.passwordMin) add(path, `A password has at least ${limits.passwordMin} characters.`)
    else if (length > limits.passwordMax) add(path, `A password has at most ${limits.passwordMax} characters.`)
  }
  if (entry.groupName?.trim() === '') add('group.name', 'Write a name for the group.')
  return faults
}

/** A name for a group of one, so that a solo player need not think of any. */
export const roomOf = (name: string): string => {
  const ending = '’s room'
  return name.trim() ? name.trim().slice(0, limits.name - ending.length) + ending : 'My room'
}
