import type { Knex } from 'knex'

export const up = async (knex: Knex): Promise<void> => {
  await knex.raw(`
    create table tunes (
      id uuid primary key,
      group_id uuid not null references groups on delete cascade,
      title text not null,
      created_by uuid references users on delete set null,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now()
    );
    create index tunes_group on tunes (group_id);
    create index tunes_created_by on tunes (created_by);

    create table takes (
      id uuid primary key,
      group_id uuid not null references groups on delete cascade,
      tune_id uuid references tunes on delete set null,
      uploader_id uuid not null references users on delete cascade,
      title text not null,
      reach text not null check (reach in ('only me', 'my teachers', 'named', 'group')),
      agreed_at timestamptz not null,
      state text not null default 'waiting' check (state in ('waiting', 'working', 'ready', 'failed')),
      stage text,
      progress double precision not null default 0,
      fault text,
      duration_sec double precision,
      sample_rate integer,
      channels integer,
      loudness_lufs double precision,
      true_peak_db double precision,
      gain_db double precision,
      original_bytes bigint not null,
      original_mime text,
      rendition_mime text,
      manifest jsonb,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now()
    );
    create index takes_group on takes (group_id, created_at desc, id);
    create index takes_tune on takes (tune_id);
    create index takes_uploader on takes (uploader_id);

    create table take_names (
      take_id uuid not null references takes on delete cascade,
      user_id uuid not null references users on delete cascade,
      primary key (take_id, user_id)
    );
    create index take_names_user on take_names (user_id);

    create table recordings (
      id uuid primary key,
      group_id uuid not null references groups on delete cascade,
      uploader_id uuid not null references users on delete cascade,
      mime text not null,
      next_piece integer not null default 0,
      bytes bigint not null default 0,
      take_id uuid references takes on delete set null,
      created_at timestamptz not null default now()
    );
    create index recordings_group on recordings (group_id);
    create index recordings_uploader on recordings (uploader_id);
    create index recordings_take on recordings (take_id);

    create table documents (
      id uuid primary key,
      kind text not null,
      tune_id uuid references tunes on delete cascade,
      take_id uuid references takes on delete cascade,
      revision integer not null default 0,
      body jsonb not null,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now(),
      check (num_nonnulls(tune_id, take_id) = 1)
    );
    create unique index documents_of_tune on documents (tune_id, kind) where tune_id is not null;
    create unique index documents_of_take on documents (take_id, kind) where take_id is not null;

    create table document_edits (
      id uuid primary key,
      document_id uuid not null references documents on delete cascade,
      revision integer not null,
      actor_id uuid references users on delete set null,
      operations jsonb not null,
      -- what takes it back, in order
      inverse jsonb not null,
      parts text[] not null,
      -- the edit that this one takes back or does again
      undoes uuid references document_edits on delete cascade,
      redoes uuid references document_edits on delete cascade,
      created_at timestamptz not null default now(),
      unique (document_id, revision)
    );
    create index document_edits_actor on document_edits (actor_id);
    create index document_edits_undoes on document_edits (undoes);
    create index document_edits_redoes on document_edits (redoes);
  `)
}

export const down = async (): Promise<void> => {}
