import type { accountRoutes } from '@shared/contracts/account'
import { problem } from '@shared/errors/problems'
import type { RateLimits } from '@server/http/guards'
import type { Handlers } from '@server/http/handlers'
import type { AccountService } from '@server/services/account.service'

interface Deps {
  accounts: AccountService
  limits: RateLimits
}

export const accountHandlers = ({ accounts, limits }: Deps): Handlers<typeof accountRoutes> => ({
  me: ({ actor }) => accounts.me(actor.id),
  update: ({ actor, body }) => accounts.update(actor, body),
  signUp: async ({ body, asker, signIn }) => {
    await limits.open(asker.address)
    const me = await accounts.signUp(body, asker)
    await signIn.begin(me.id)
    return me
  },
  signIn: async ({ body, asker, signIn }) => {
    await limits.signIn.before(body.email, asker.address)
    const actor = await signIn.check(body.email, body.password)
    if (!actor) {
      await accounts.signedIn(null, false, asker)
      throw problem('sign-in-failed')
    }
    await limits.signIn.passed(body.email, asker.address)
    await signIn.begin(actor.id)
    await accounts.signedIn(actor.id, true, asker)
    return accounts.me(actor.id)
  },
  signOut: async ({ actor, asker, signIn }) => {
    await signIn.end()
    if (actor) await accounts.signedOut(actor, asker)
    return {}
  },
  password: async ({ actor, body, asker }) => {
    await accounts.changePassword(actor, body, asker)
    return {}
  }
})
