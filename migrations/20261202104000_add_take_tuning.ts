import type { Knex } from 'knex'

/** Takes that were read before stay without one. */
export const up = async (knex: Knex): Promise<void> => {
  await knex.raw(`
    alter table takes add column tuning_cents double precision check (tuning_cents between -50 and 50)
  `)
}

export const down = async (): Promise<void> => {}
