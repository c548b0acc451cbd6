// Loops that a person keeps for themselves. Nobody else is told of them, so a change writes no group event.
import type { ChangeSavedLoop, CreateSavedLoop, SavedLoop } from '@shared/contracts/saved-loops'
import { problem } from '@shared/errors/problems'
import { limits } from '@shared/limits'
import type { Span } from '@shared/timing/types'
import type { Db } from '@server/db/knex'
import type { Actor } from '@server/http/handlers'
import type { SavedLoopsRepo, StoredLoop } from '@server/repositories/saved-loops.repo'
import type { TakeHome, TakesRepo } from '@server/repositories/takes.repo'
import { stillAllowed } from '@server/services/still-allowed'

interface Deps {
  db: Db
  savedLoops: SavedLoopsRepo
  takes: Pick<TakesRepo, 'home'>
}

export const createSavedLoopService = ({ db, savedLoops, takes }: Deps) => {
  const homeOf = async (takeId: string, trx: Db): Promise<TakeHome> => {
    const home = await takes.home(takeId, trx)
    if (!home) throw problem('not-found')
    return home
  }
  const found = async (id: string, trx: Db): Promise<StoredLoop> => {
    const loop = await savedLoops.find(id, trx)
    if (!loop) throw problem('not-found')
    return loop
  }
  const within = (span: Span, { durationSec }: TakeHome): void => {
    if (durationSec && span.startSec > durationSec)
      throw problem('invalid', {
        errors: [{ in: 'body', path: 'span.startSec', message: 'The take is over before that.' }]
      })
  }
  /** The loop and the home of its take, with the rights checked again and the group locked. */
  const held = async (
    actor: Actor,
    permission: 'saved-loop:change' | 'saved-loop:delete',
    savedLoopId: string,
    trx: Db
  ): Promise<TakeHome> => {
    const home = await homeOf((await found(savedLoopId, trx)).takeId, trx)
    await stillAllowed(actor, permission, { savedLoopId }, home.groupId, trx)
    return home
  }

  return {
    list: async (actor: Actor, takeId: string): Promise<{ items: SavedLoop[] }> => ({
      items: await savedLoops.ofPerson(takeId, actor.id)
    }),

    create: (actor: Actor, takeId: string, input: CreateSavedLoop): Promise<SavedLoop> =>
      db.transaction(async (trx) => {
        const home = await homeOf(takeId, trx)
        await stillAllowed(actor, 'take:practise', { takeId }, home.groupId, trx)
        const before = await savedLoops.find(input.id, trx)
        if (before) {
          // Sent again after a lost answer.
          if (before.takeId !== takeId || before.userId !== actor.id) throw problem('already-there')
          return before
        }
        within(input.span, home)
        if ((await savedLoops.count(takeId, actor.id, trx)) >= limits.savedLoopsPerTake) throw problem('over-quota')
        await savedLoops.insert(takeId, actor.id, input, trx)
        return found(input.id, trx)
      }),

    change: (actor: Actor, savedLoopId: string, change: ChangeSavedLoop): Promise<SavedLoop> =>
      db.transaction(async (trx) => {
        const home = await held(actor, 'saved-loop:change', savedLoopId, trx)
        if (change.span) within(change.span, home)
        await savedLoops.change(savedLoopId, change, trx)
        return found(savedLoopId, trx)
      }),

    remove: (actor: Actor, savedLoopId: string): Promise<void> =>
      db.transaction(async (trx) => {
        await held(actor, 'saved-loop:delete', savedLoopId, trx)
        if (!(await savedLoops.remove(savedLoopId, trx))) throw problem('not-found')
      })
  }
}
export type SavedLoopService = ReturnType<typeof createSavedLoopService>
