import { type PreferenceChange, type Preferences, readPreferences } from '@shared/practice/preferences'
import type { Db } from '@server/db/knex'

export const createPreferencesRepo = (db: Db) => ({
  of: async (userId: string): Promise<Preferences> => {
    const row = await db('users').where({ id: userId }).first('preferences')
    return readPreferences(row?.preferences)
  },
  /** One statement, so that two browsers that change different keys at once lose nothing. */
  change: async (userId: string, change: PreferenceChange): Promise<Preferences> => {
    const entries = Object.entries(change).filter(([, value]) => value !== undefined)
    const kept = Object.fromEntries(entries.filter(([, value]) => value !== null))
    const dropped = entries.filter(([, value]) => value === null).map(([name]) => name)
    const [row] = await db('users')
      .where({ id: userId })
      .update({
        preferences: db.raw('(preferences || ?::jsonb) - ?::text[]', [JSON.stringify(kept), dropped]),
        updated_at: db.fn.now()
      })
      .returning('preferences')
    return readPreferences(row?.preferences)
  }
})
export type PreferencesRepo = ReturnType<typeof createPreferencesRepo>
