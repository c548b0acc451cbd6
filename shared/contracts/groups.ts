import { z } from 'zod'
import { Instant, line, Person, Role, Uuid } from '@shared/contracts/common'
import { defineRoute } from '@shared/contracts/route'
import { limits } from '@shared/limits'

export const GroupParams = z.object({ groupId: Uuid })

export const Group = z.object({
  id: Uuid,
  name: z.string(),
  role: Role,
  isRosterShown: z.boolean(),
  lastSeq: z.number().int(),
  abilities: z.array(z.string())
})
export type Group = z.infer<typeof Group>

export const GroupPerson = z.object({
  id: Uuid,
  name: z.string(),
  role: Role,
  isMinor: z.boolean(),
  hasGuardianConsent: z.boolean(),
  joinedAt: Instant
})
export type GroupPerson = z.infer<typeof GroupPerson>

export const TeacherLink = z.object({
  id: Uuid,
  teacher: Person,
  student: Person,
  hasTeacherAgreed: z.boolean(),
  hasStudentAgreed: z.boolean()
})
export type TeacherLink = z.infer<typeof TeacherLink>

export const Invitation = z.object({
  id: Uuid,
  role: Role,
  note: z.string(),
  createdBy: Person,
  createdAt: Instant,
  expiresAt: Instant,
  state: z.enum(['open', 'used', 'expired', 'revoked'])
})
export type Invitation = z.infer<typeof Invitation>

const Invited = z.object({ groupName: z.string(), role: Role, invitedBy: z.string() })

export const groupRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/groups',
    access: 'account:own',
    summary: 'My groups',
    response: z.object({ items: z.array(Group) })
  }),
  create: defineRoute({
    method: 'POST',
    path: '/api/groups',
    access: 'group:create',
    summary: 'Start a group',
    body: z.object({ id: Uuid, name: line(limits.name) }),
    status: 201,
    response: Group
  }),
  get: defineRoute({
    method: 'GET',
    path: '/api/groups/:groupId',
    access: 'group:read',
    summary: 'One group',
    params: GroupParams,
    response: Group
  }),
  update: defineRoute({
    method: 'PATCH',
    path: '/api/groups/:groupId',
    access: 'group:edit',
    summary: 'Rename a group, show or hide its roster',
    params: GroupParams,
    body: z.object({ name: line(limits.name).optional(), isRosterShown: z.boolean().optional() }),
    response: Group
  }),
  people: defineRoute({
    method: 'GET',
    path: '/api/groups/:groupId/people',
    access: 'group:people',
    summary: 'The people of a group whom the asker may know of',
    params: GroupParams,
    response: z.object({ items: z.array(GroupPerson) })
  }),
  setRole: defineRoute({
    method: 'PATCH',
    path: '/api/groups/:groupId/people/:userId',
    access: 'group:set-role',
    summary: 'Give a person another role',
    params: GroupParams.extend({ userId: Uuid }),
    body: z.object({ role: Role }),
    response: GroupPerson
  }),
  removePerson: defineRoute({
    method: 'DELETE',
    path: '/api/groups/:groupId/people/:userId',
    access: 'group:set-role',
    summary: 'Take a person out of a group',
    params: GroupParams.extend({ userId: Uuid })
  }),
  leave: defineRoute({
    method: 'POST',
    path: '/api/groups/:groupId/leave',
    access: 'group:leave',
    summary: 'Leave a group',
    params: GroupParams
  })
}

export const invitationRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/groups/:groupId/invitations',
    access: 'group:invite',
    summary: 'Invitation links of a group',
    params: GroupParams,
    response: z.object({ items: z.array(Invitation) })
  }),
  create: defineRoute({
    method: 'POST',
    path: '/api/groups/:groupId/invitations',
    access: 'group:invite',
    summary: 'Make an invitation link; its token is told once',
    params: GroupParams,
    body: z.object({ id: Uuid, role: Role, note: z.string().max(limits.title).default('') }),
    status: 201,
    response: Invitation.extend({ token: z.string() })
  }),
  revoke: defineRoute({
    method: 'DELETE',
    path: '/api/invitations/:invitationId',
    access: 'invitation:revoke',
    summary: 'Make an invitation link useless',
    params: z.object({ invitationId: Uuid })
  }),
  look: defineRoute({
    method: 'POST',
    path: '/api/invitations/look',
    access: 'invitation:look',
    summary: 'What an invitation link leads to',
    body: z.object({ token: z.string().min(20).max(200) }),
    response: Invited
  }),
  accept: defineRoute({
    method: 'POST',
    path: '/api/invitations/accept',
    access: 'invitation:accept',
    summary: 'Join a group by its invitation link',
    body: z.object({ token: z.string().min(20).max(200) }),
    response: Group
  })
}

export const linkRoutes = {
  list: defineRoute({
    method: 'GET',
    path: '/api/groups/:groupId/links',
    access: 'group:read',
    summary: 'My teacher-student links in this group (all of them for its owner)',
    params: GroupParams,
    response: z.object({ items: z.array(TeacherLink) })
  }),
  create: defineRoute({
    method: 'POST',
    path: '/api/groups/:groupId/links',
    access: 'group:link',
    summary: 'Ask to be linked as teacher and student; the other side agrees',
    params: GroupParams,
    body: z.object({ id: Uuid, teacherId: Uuid, studentId: Uuid }),
    status: 201,
    response: TeacherLink
  }),
  agree: defineRoute({
    method: 'POST',
    path: '/api/links/:linkId/agree',
    access: 'link:agree',
    summary: 'Agree to a teacher-student link',
    params: z.object({ linkId: Uuid }),
    response: TeacherLink
  }),
  end: defineRoute({
    method: 'DELETE',
    path: '/api/links/:linkId',
    access: 'link:end',
    summary: 'End a teacher-student link',
    params: z.object({ linkId: Uuid })
  })
}
