import { z } from 'zod'
import { line, Role, Uuid } from '@shared/contracts/common'
import { defineRoute } from '@shared/contracts/route'
import { limits } from '@shared/limits'

export const Email = z.email().max(limits.email)
/** Any Unicode, never truncated, never case-folded (ASVS V6.2). The list of too common ones is checked on the server. */
export const NewPassword = z.string().min(limits.passwordMin, 'At least 8 characters.').max(limits.passwordMax)

export const Membership = z.object({ groupId: Uuid, groupName: z.string(), role: Role })
export const Me = z.object({
  id: Uuid,
  name: z.string(),
  email: z.string(),
  isOperator: z.boolean(),
  tapLagMs: z.number().nullable(),
  memberships: z.array(Membership)
})
export type Me = z.infer<typeof Me>

export const SignUp = z.object({
  id: Uuid,
  name: line(limits.name),
  email: Email,
  password: NewPassword,
  /** The new group's id and name; left out when coming by an invitation link. */
  group: z.object({ id: Uuid, name: line(limits.name) }).optional(),
  invitation: z.string().min(20).max(200).optional()
})

export const accountRoutes = {
  me: defineRoute({ method: 'GET', path: '/api/me', access: 'account:own', summary: 'Who is signed in', response: Me }),
  update: defineRoute({
    method: 'PATCH',
    path: '/api/me',
    access: 'account:own',
    summary: 'Change what the account keeps',
    body: z.object({
      name: line(limits.name).optional(),
      tapLagMs: z.number().min(-500).max(500).nullable().optional()
    }),
    response: Me
  }),
  signUp: defineRoute({
    method: 'POST',
    path: '/api/sign-up',
    access: 'account:open',
    summary: 'Open an account, with a new group or by invitation',
    body: SignUp,
    status: 201,
    response: Me
  }),
  signIn: defineRoute({
    method: 'POST',
    path: '/api/sign-in',
    access: 'account:open',
    summary: 'Sign in',
    body: z.object({ email: z.string().min(1).max(limits.email), password: z.string().min(1).max(limits.passwordMax) }),
    response: Me
  }),
  signOut: defineRoute({
    method: 'POST',
    path: '/api/sign-out',
    access: 'account:open',
    summary: 'Sign out',
    status: 200
  }),
  password: defineRoute({
    method: 'POST',
    path: '/api/me/password',
    access: 'account:own',
    summary: 'Change the password; every other sign-in ends',
    body: z.object({ current: z.string().min(1).max(limits.passwordMax), next: NewPassword })
  })
}
