import type { Knex } from 'knex'

export const up = async (knex: Knex): Promise<void> => {
  await knex.raw(`
    create table comments (
      id uuid primary key,
      take_id uuid not null references takes on delete cascade,
      author_id uuid not null references users on delete cascade,
      kind text not null check (kind in ('question', 'observation', 'to fix', 'good')),
      text text not null,
      start_sec double precision not null check (start_sec >= 0),
      end_sec double precision not null,
      settled_at timestamptz,
      settled_by uuid references users on delete set null,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now(),
      check (end_sec >= start_sec)
    );
    create index comments_take on comments (take_id, start_sec, created_at);
    create index comments_author on comments (author_id);
    create index comments_settled_by on comments (settled_by);

    create table replies (
      id uuid primary key,
      comment_id uuid not null references comments on delete cascade,
      author_id uuid not null references users on delete cascade,
      text text not null,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now()
    );
    create index replies_comment on replies (comment_id, created_at);
    create index replies_author on replies (author_id);

    create table sessions (
      id uuid primary key,
      group_id uuid not null references groups on delete cascade,
      take_id uuid not null references takes on delete cascade,
      started_by uuid not null references users on delete cascade,
      leader_id uuid references users on delete set null,
      transport jsonb not null,
      started_at timestamptz not null default now(),
      ended_at timestamptz
    );
    create unique index sessions_live on sessions (take_id) where ended_at is null;
    create index sessions_group on sessions (group_id);
    create index sessions_started_by on sessions (started_by);
    create index sessions_leader on sessions (leader_id);

    create table session_people (
      session_id uuid not null references sessions on delete cascade,
      user_id uuid not null references users on delete cascade,
      is_away boolean not null default false,
      joined_at timestamptz not null default now(),
      left_at timestamptz,
      primary key (session_id, user_id)
    );
    create index session_people_user on session_people (user_id);

    -- what npm start wrote once, so that a demo group deleted by hand does not come back
    create table seeded (
      name text primary key,
      at timestamptz not null default now()
    );
  `)
}

export const down = async (): Promise<void> => {}
