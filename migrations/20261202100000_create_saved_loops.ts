import type { Knex } from 'knex'

export const up = async (knex: Knex): Promise<void> => {
  await knex.raw(`
    create table saved_loops (
      id uuid primary key,
      take_id uuid not null references takes on delete cascade,
      user_id uuid not null references users on delete cascade,
      name text not null check (char_length(name) between 1 and 80),
      start_sec double precision not null check (start_sec >= 0),
      end_sec double precision not null,
      rate double precision check (rate between 0.2 and 1.5),
      ladder jsonb,
      rest_beats smallint not null default 0 check (rest_beats between 0 and 64),
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now(),
      check (end_sec > start_sec)
    );
    create index saved_loops_of_one on saved_loops (take_id, user_id, start_sec);
    create index saved_loops_user on saved_loops (user_id);
  `)
}

export const down = async (): Promise<void> => {}
