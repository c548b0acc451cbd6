// Who may do what. `grant` lists the relations that allow it; of the others, those in `knows` are told 403, the rest 404.
import type { Relation } from '@shared/access/relations'

export type Resource =
  | 'site'
  | 'group'
  | 'tune'
  | 'take'
  | 'savedLoop'
  | 'clip'
  | 'comment'
  | 'reply'
  | 'invitation'
  | 'link'
  | 'session'
  | 'recording'

export interface PermissionDef {
  resource: Resource
  grant: readonly Relation[]
  knows: readonly Relation[]
}

const everybody = ['anonymous', 'stranger'] as const
const signedIn = ['stranger'] as const
const inGroup = ['listener', 'member', 'teacher', 'owner'] as const
const writers = ['member', 'teacher', 'owner'] as const
const hearing = ['takeOwner', 'takeOwnersTeacher', 'namedMember', 'namedListener', 'hearer', 'guestHearer'] as const
const hearingWriters = ['takeOwner', 'takeOwnersTeacher', 'namedMember', 'hearer'] as const
const knowsTake = [...hearing, 'owner'] as const

const on = (resource: Resource, grant: readonly Relation[], knows: readonly Relation[] = []): PermissionDef => ({
  resource,
  grant,
  knows
})

export const permissions = {
  'site:visit': on('site', everybody),
  'account:open': on('site', everybody),
  'account:own': on('site', signedIn),
  'group:create': on('site', signedIn),
  'invitation:look': on('site', everybody),
  'invitation:accept': on('site', signedIn),

  'group:read': on('group', inGroup),
  'group:edit': on('group', ['owner'], inGroup),
  'group:people': on('group', inGroup),
  'group:set-role': on('group', ['owner'], inGroup),
  'group:leave': on('group', inGroup),
  'group:invite': on('group', ['owner', 'teacher'], inGroup),
  'group:link': on('group', writers, inGroup),
  'group:events': on('group', inGroup),
  'group:add-tune': on('group', writers, inGroup),
  'group:add-take': on('group', writers, inGroup),

  'invitation:revoke': on('invitation', ['owner', 'author'], ['teacher', 'member', 'listener']),
  'link:agree': on('link', ['author']),
  'link:end': on('link', ['author', 'owner']),

  'tune:read': on('tune', inGroup),
  'tune:edit': on('tune', writers, inGroup),
  'tune:delete': on('tune', ['owner', 'teacher', 'author'], inGroup),

  'take:read': on('take', hearing, knowsTake),
  'take:hear': on('take', hearing, knowsTake),
  'take:edit': on('take', ['takeOwner'], knowsTake),
  'take:delete': on('take', ['takeOwner', 'owner'], knowsTake),
  'take:edit-bars': on('take', hearingWriters, knowsTake),
  'take:comment': on('take', hearingWriters, knowsTake),
  'take:session': on('take', hearingWriters, knowsTake),
  'take:practise': on('take', hearing, knowsTake),

  'saved-loop:change': on('savedLoop', ['author']),
  'saved-loop:delete': on('savedLoop', ['author']),

  'clip:read': on('clip', ['author']),
  'clip:delete': on('clip', ['author']),

  'comment:edit': on('comment', ['author'], hearing),
  'comment:delete': on('comment', ['author', 'takeOwner', 'owner'], hearing),
  'comment:settle': on('comment', ['author', 'takeOwner', 'takeOwnersTeacher', 'teacher', 'owner'], hearing),
  'comment:reply': on('comment', hearingWriters, hearing),
  'reply:edit': on('reply', ['author'], hearing),
  'reply:delete': on('reply', ['author', 'takeOwner', 'owner'], hearing),

  'session:join': on('session', hearing),
  'session:steer': on('session', hearing),
  'session:end': on('session', hearingWriters, hearing),

  'recording:write': on('recording', ['author'])
} as const satisfies Record<string, PermissionDef>

export type Permission = keyof typeof permissions

export const definitionOf = (permission: Permission): PermissionDef => permissions[permission]

export const allows = (permission: Permission, held: ReadonlySet<Relation>): boolean =>
  definitionOf(permission).grant.some((relation) => held.has(relation))

/** The status a refused person gets; null when they are let in. The one place that decides this. */
export const denial = (permission: Permission, held: ReadonlySet<Relation>): 401 | 403 | 404 | null => {
  if (allows(permission, held)) return null
  if (held.has('anonymous')) return 401
  return definitionOf(permission).knows.some((relation) => held.has(relation)) ? 403 : 404
}

/** The permissions on one kind of thing that these relations give: what the buttons read. */
export const abilitiesOn = (resource: Resource, held: ReadonlySet<Relation>): Permission[] =>
  (Object.keys(permissions) as Permission[]).filter(
    (permission) => definitionOf(permission).resource === resource && allows(permission, held)
  )
