// What the trade expects of access, written down by hand from the product's description and not from the code:
// which relation to a thing gives which answer. `+` let in, `a` 401, `r` 403 (it is known to be there), `h` 404.
import type { Permission } from '@shared/access/permissions'
import type { Relation } from '@shared/access/relations'

/** The order of the columns below. */
export const columns: readonly Relation[] = [
  'anonymous',
  'stranger',
  'operator',
  'listener',
  'member',
  'teacher',
  'owner',
  'takeOwner',
  'takeOwnersTeacher',
  'namedMember',
  'namedListener',
  'hearer',
  'guestHearer',
  'author'
]

const table: Record<Permission, string> = {
  // site:               anonymous, stranger, operator | listener member teacher owner | takeOwner teacher namedM namedL hearer guest | author
  'site:visit': '++h hhhh hhhhhh h',
  'account:open': '++h hhhh hhhhhh h',
  'account:own': 'a+h hhhh hhhhhh h',
  'group:create': 'a+h hhhh hhhhhh h',
  'invitation:look': '++h hhhh hhhhhh h',
  'invitation:accept': 'a+h hhhh hhhhhh h',

  'group:read': 'ahh ++++ hhhhhh h',
  'group:edit': 'ahh rrr+ hhhhhh h',
  'group:people': 'ahh ++++ hhhhhh h',
  'group:set-role': 'ahh rrr+ hhhhhh h',
  'group:leave': 'ahh ++++ hhhhhh h',
  'group:invite': 'ahh rr++ hhhhhh h',
  'group:link': 'ahh r+++ hhhhhh h',
  'group:events': 'ahh ++++ hhhhhh h',
  'group:add-tune': 'ahh r+++ hhhhhh h',
  'group:add-take': 'ahh r+++ hhhhhh h',

  'invitation:revoke': 'ahh rrr+ hhhhhh +',
  'link:agree': 'ahh hhhh hhhhhh +',
  'link:end': 'ahh hhh+ hhhhhh +',

  'tune:read': 'ahh ++++ hhhhhh h',
  'tune:edit': 'ahh r+++ hhhhhh h',
  'tune:delete': 'ahh rr++ hhhhhh +',

  // A role alone opens no take; only its owner's card tells a group's owner that it is there.
  'take:read': 'ahh hhhr ++++++ h',
  'take:hear': 'ahh hhhr ++++++ h',
  'take:edit': 'ahh hhhr +rrrrr h',
  'take:delete': 'ahh hhh+ +rrrrr h',
  'take:edit-bars': 'ahh hhhr +++r+r h',
  'take:comment': 'ahh hhhr +++r+r h',
  'take:session': 'ahh hhhr +++r+r h',
  'take:practise': 'ahh hhhr ++++++ h',

  // Roles and authorship below count only together with hearing the take: the server drops them otherwise.
  'comment:edit': 'ahh hhhh rrrrrr +',
  'comment:delete': 'ahh hhh+ +rrrrr +',
  'comment:settle': 'ahh hh++ ++rrrr +',
  'comment:reply': 'ahh hhhh +++r+r h',
  'reply:edit': 'ahh hhhh rrrrrr +',
  'reply:delete': 'ahh hhh+ +rrrrr +',

  // Nobody but its keeper is ever told that it is there.
  'saved-loop:change': 'ahh hhhh hhhhhh +',
  'saved-loop:delete': 'ahh hhhh hhhhhh +',
  'clip:read': 'ahh hhhh hhhhhh +',
  'clip:delete': 'ahh hhhh hhhhhh +',

  'session:join': 'ahh hhhh ++++++ h',
  'session:steer': 'ahh hhhh ++++++ h',
  'session:end': 'ahh hhhh +++r+r h',

  'recording:write': 'ahh hhhh hhhhhh +'
}

export type Verdict = 'allowed' | 401 | 403 | 404
const verdictOf: Record<string, Verdict> = { '+': 'allowed', a: 401, r: 403, h: 404 }

export const permissionNames = Object.keys(table) as Permission[]

export const cell = (permission: Permission, relation: Relation): Verdict => {
  const letter = table[permission].replaceAll(' ', '')[columns.indexOf(relation)]
  const verdict = verdictOf[letter ?? '']
  if (verdict === undefined) throw new Error(`${permission} says nothing of ${relation}`)
  return verdict
}

/** What somebody with all these relations is to be told: the most that one of them gives. */
export const expected = (permission: Permission, held: readonly Relation[]): Verdict => {
  const verdicts = held.map((relation) => cell(permission, relation))
  for (const verdict of ['allowed', 401, 403] as const) if (verdicts.includes(verdict)) return verdict
  return 404
}
