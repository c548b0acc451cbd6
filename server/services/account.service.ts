import type { Me } from '@shared/contracts/account'
import { problem } from '@shared/errors/problems'
import type { Db } from '@server/db/knex'
import type { Actor, Asker } from '@server/http/handlers'
import type { AccountsRepo } from '@server/repositories/accounts.repo'
import type { AuditRepo } from '@server/repositories/audit.repo'
import type { GroupService } from '@server/services/groups.service'
import type { InvitationService } from '@server/services/invitations.service'
import { checkNobody, hashPassword, isPassword, passwordFault } from '@server/services/passwords'

interface Deps {
  db: Db
  accounts: AccountsRepo
  audit: AuditRepo
  groups: Pick<GroupService, 'createFor'>
  invitations: Pick<InvitationService, 'redeem'>
}

export interface SignUpInput {
  id: string
  name: string
  email: string
  password: string
  group?: { id: string; name: string } | undefined
  invitation?: string | undefined
}

const refusePassword = (password: string, path: string): void => {
  const fault = passwordFault(password)
  if (fault) throw problem('invalid', { errors: [{ in: 'body', path, message: fault }] })
}

export const createAccountService = ({ db, accounts, audit, groups, invitations }: Deps) => {
  const me = async (id: string): Promise<Me> => {
    const found = await accounts.me(id)
    if (!found) throw problem('not-found')
    return found
  }

  /** The person behind an e-mail and password; null, after the same time, for a wrong password and for no such account. */
  const check = async (email: string, password: string): Promise<Actor | null> => {
    const account = await accounts.byEmail(email)
    const fits = account ? await isPassword(account.passwordHash, password) : await checkNobody(password)
    if (!account || !fits || account.isDisabled) return null
    return { id: account.id, name: account.name, isOperator: account.isOperator }
  }

  return {
    me,
    check,
    find: (id: string): Promise<Actor | null> => accounts.actor(id),

    signUp: async (input: SignUpInput, asker: Asker): Promise<Me> => {
      if (Boolean(input.group) === Boolean(input.invitation)) {
        throw problem('invalid', { detail: 'Name a new group, or come by an invitation link.' })
      }
      refusePassword(input.password, 'password')
      const passwordHash = await hashPassword(input.password)
      await db.transaction(async (trx) => {
        const taken = await accounts.byEmail(input.email, trx)
        if (taken) {
          throw problem('already-there', {
            detail: 'There is an account with this e-mail. Sign in, then open the link again.'
          })
        }
        await accounts.insert({ id: input.id, name: input.name, email: input.email, passwordHash }, trx)
        const actor: Actor = { id: input.id, name: input.name, isOperator: false }
        await audit.add({ what: 'sign-up', actorId: input.id, address: asker.address, requestId: asker.requestId }, trx)
        if (input.group) await groups.createFor(actor, input.group, trx)
        else await invitations.redeem(actor, String(input.invitation), asker, trx)
      })
      return me(input.id)
    },

    update: async (
      actor: Actor,
      change: { name?: string | undefined; tapLagMs?: number | null | undefined }
    ): Promise<Me> => {
      await accounts.update(actor.id, change)
      return me(actor.id)
    },

    changePassword: async (actor: Actor, input: { current: string; next: string }, asker: Asker): Promise<void> => {
      const account = await accounts.byId(actor.id)
      if (!account || !(await isPassword(account.passwordHash, input.current))) {
        throw problem('invalid', { errors: [{ in: 'body', path: 'current', message: 'That is not your password.' }] })
      }
      refusePassword(input.next, 'next')
      const passwordHash = await hashPassword(input.next)
      await db.transaction(async (trx) => {
        await accounts.setPassword(actor.id, passwordHash, trx)
        await accounts.endSignIns(actor.id, asker.signInId, trx)
        await audit.add(
          { what: 'password-changed', actorId: actor.id, address: asker.address, requestId: asker.requestId },
          trx
        )
      })
    },

    denied: (actor: Actor, asker: Asker): Promise<void> =>
      audit.add({ what: 'access-denied', actorId: actor.id, address: asker.address, requestId: asker.requestId }),
    signedIn: (actorId: string | null, isIn: boolean, asker: Asker): Promise<void> =>
      audit.add({
        what: isIn ? 'sign-in' : 'sign-in-failed',
        actorId,
        address: asker.address,
        requestId: asker.requestId
      }),
    signedOut: (actor: Actor, asker: Asker): Promise<void> =>
      audit.add({ what: 'sign-out', actorId: actor.id, address: asker.address, requestId: asker.requestId })
  }
}
export type AccountService = ReturnType<typeof createAccountService>
