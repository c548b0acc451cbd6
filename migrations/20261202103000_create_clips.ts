import type { Knex } from 'knex'

export const up = async (knex: Knex): Promise<void> => {
  await knex.raw(`
    create table clips (
      id uuid primary key,
      take_id uuid not null references takes on delete cascade,
      user_id uuid not null references users on delete cascade,
      settings jsonb not null,
      file_name text not null,
      duration_sec double precision not null check (duration_sec > 0),
      state text not null default 'waiting' check (state in ('waiting', 'working', 'ready', 'failed')),
      stage text,
      progress double precision not null default 0 check (progress between 0 and 1),
      fault text,
      bytes bigint,
      created_at timestamptz not null default now(),
      expires_at timestamptz not null,
      check ((state = 'ready') = (bytes is not null))
    );
    create index clips_take on clips (take_id, user_id, created_at);
    create index clips_user on clips (user_id);
    create index clips_expiry on clips (expires_at);
  `)
}

export const down = async (): Promise<void> => {}
