import type { Knex } from 'knex'

export const up = async (knex: Knex): Promise<void> => {
  await knex.raw(`
    alter table users add column preferences jsonb not null default '{}' check (jsonb_typeof(preferences) = 'object')
  `)
}

export const down = async (): Promise<void> => {}
