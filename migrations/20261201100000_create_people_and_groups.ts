import type { Knex } from 'knex'

export const up = async (knex: Knex): Promise<void> => {
  await knex.raw(`
    create table users (
      id uuid primary key,
      name text not null,
      email text not null,
      -- lower-cased for look-up; the address itself stays as typed
      email_key text not null unique,
      password_hash text not null,
      is_operator boolean not null default false,
      is_minor boolean not null default false,
      guardian_name text,
      guardian_consent_at timestamptz,
      tap_lag_ms double precision,
      disabled_at timestamptz,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now(),
      check (not is_minor or guardian_consent_at is not null)
    );

    -- connect-pg-simple's table, under our name
    create table sign_ins (
      sid text primary key,
      sess json not null,
      expire timestamptz not null
    );
    create index sign_ins_expire on sign_ins (expire);
    create index sign_ins_user on sign_ins ((sess #>> '{passport,user}'));

    create table groups (
      id uuid primary key,
      name text not null,
      is_roster_shown boolean not null default true,
      last_seq bigint not null default 0,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now()
    );

    create table memberships (
      group_id uuid not null references groups on delete cascade,
      user_id uuid not null references users on delete cascade,
      role text not null check (role in ('owner', 'teacher', 'member', 'listener')),
      created_at timestamptz not null default now(),
      primary key (group_id, user_id)
    );
    create index memberships_user on memberships (user_id);

    create table teacher_links (
      id uuid primary key,
      group_id uuid not null references groups on delete cascade,
      teacher_id uuid not null references users on delete cascade,
      student_id uuid not null references users on delete cascade,
      teacher_agreed_at timestamptz,
      student_agreed_at timestamptz,
      created_at timestamptz not null default now(),
      unique (group_id, teacher_id, student_id),
      check (teacher_id <> student_id)
    );
    create index teacher_links_teacher on teacher_links (teacher_id);
    create index teacher_links_student on teacher_links (student_id);

    create table invitations (
      id uuid primary key,
      group_id uuid not null references groups on delete cascade,
      role text not null check (role in ('owner', 'teacher', 'member', 'listener')),
      note text not null default '',
      token_hash bytea not null unique,
      created_by uuid not null references users on delete cascade,
      created_at timestamptz not null default now(),
      expires_at timestamptz not null,
      used_at timestamptz,
      used_by uuid references users on delete set null,
      revoked_at timestamptz
    );
    create index invitations_group on invitations (group_id);
    create index invitations_created_by on invitations (created_by);
    create index invitations_used_by on invitations (used_by);

    create table events (
      group_id uuid not null references groups on delete cascade,
      seq bigint not null,
      type text not null,
      object_id uuid,
      take_id uuid,
      actor_id uuid,
      created_at timestamptz not null default now(),
      primary key (group_id, seq)
    );

    create table audit_log (
      id bigint generated always as identity primary key,
      at timestamptz not null default now(),
      what text not null,
      actor_id uuid,
      object_id uuid,
      group_id uuid,
      address text,
      request_id text
    );
    create function refuse_change() returns trigger language plpgsql as $$
      begin raise exception 'the audit log is only ever added to'; end $$;
    create trigger audit_log_stays before update or delete on audit_log for each row execute function refuse_change();
    create trigger audit_log_kept before truncate on audit_log for each statement execute function refuse_change();
  `)
}

export const down = async (): Promise<void> => {}
