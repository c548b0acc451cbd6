import type { Role } from '@shared/contracts/common'
import type { Choice } from '@client/ui/select'

/** As said of a person: "you are a teacher here". */
export const roleWords: Record<Role, string> = {
  owner: 'owner',
  teacher: 'teacher',
  member: 'member',
  listener: 'listener'
}

export const withArticle = (role: Role): string => `${role === 'owner' ? 'an' : 'a'} ${roleWords[role]}`

export const roleChoices: readonly (Choice<Role> & { value: Role })[] = [
  { value: 'listener', label: 'listener', note: 'Hears and reads what is shared with them, and changes nothing.' },
  { value: 'member', label: 'member', note: 'Uploads, lays bars, comments, and listens live with the others.' },
  { value: 'teacher', label: 'teacher', note: 'As a member; may also teach others here, and invite members.' },
  { value: 'owner', label: 'owner', note: 'Invites, sets roles and tidies up. A group may have several.' }
]

/** Who can stand on the teaching side of a link. */
export const mayTeach = (role: Role): boolean => role === 'teacher' || role === 'owner'
