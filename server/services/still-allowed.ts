// Rights are checked before a handler runs; a write checks them once more inside its transaction, with the group
// locked, so that nothing is written after a removal was acknowledged (ASVS V15.4.2). Call it first in a transaction.
import { denial, type Permission } from '@shared/access/permissions'
import { problem } from '@shared/errors/problems'
import { createRelations } from '@server/access/relations'
import type { Db } from '@server/db/knex'
import type { Actor } from '@server/http/handlers'
import { createAccessRepo } from '@server/repositories/access.repo'

/** For writes whose right is not a matter of the group: the lock alone. */
export const lockGroup = (groupId: string, trx: Db): Promise<void> => createAccessRepo(trx).lockGroup(groupId)

/** Throws `not-found` or `forbidden` when the person has lost the right meanwhile. */
export const stillAllowed = async (
  actor: Actor,
  permission: Permission,
  ids: Record<string, unknown>,
  groupId: string,
  trx: Db
): Promise<void> => {
  const repo = createAccessRepo(trx)
  await repo.lockGroup(groupId)
  const refused = denial(permission, await createRelations(repo).of(actor, permission, ids))
  if (refused) throw problem(refused === 403 ? 'forbidden' : 'not-found')
}
