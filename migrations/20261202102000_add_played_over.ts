import type { Knex } from 'knex'

export const up = async (knex: Knex): Promise<void> => {
  await knex.raw(`
    alter table takes add column over_take_id uuid references takes on delete set null check (over_take_id <> id);
    create index takes_over_take on takes (over_take_id) where over_take_id is not null;
  `)
}

export const down = async (): Promise<void> => {}
