// Writes the demo group once in the life of a database, whole or not at all.
import type { Knex } from 'knex'
import type { MediaStorage } from '@server/media/storage'
import { seedPersonas } from './01_personas'
import { seedDemoGroup } from './02_demo_group'

const name = 'demo group'

/** True when it was written now; false when it has been written before, even if it was deleted since. */
export const seedOnce = (db: Knex, storage: MediaStorage, now: Date): Promise<boolean> =>
  db.transaction(async (trx) => {
    const [first] = await trx('seeded').insert({ name }).onConflict().ignore().returning('name')
    if (!first) return false
    await seedPersonas(trx, now)
    await seedDemoGroup(trx, storage, now)
    return true
  })
