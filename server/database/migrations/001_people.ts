import type { Migration } from 'kysely'
import { runStatements } from './statements'

/** People, how they prove who they are, and who answers for whom. */
export const people: Migration = {
  up: db => runStatements(db, `
    create table studio (
      id integer primary key check (id = 1),
      name text not null,
      time_zone text not null,
      currency text not null check (length(currency) = 3),
      contact_email text not null,
      adult_age integer not null default 18 check (adult_age between 13 and 21)
    ) strict;

    create table users (
      id text primary key,
      email text not null,
      email_key text not null unique,
      name text not null,
      role text not null check (role in ('student', 'guardian', 'coach', 'owner')),
      time_zone text not null,
      password_hash text,
      email_confirmed_at_ms integer,
      suspended_at_ms integer,
      picture_key text,
      created_at_ms integer not null
    ) strict;
    create index users_by_creation on users (created_at_ms desc, id desc);

    create table sessions (
      id text primary key,
      user_id text not null references users on delete cascade,
      created_at_ms integer not null,
      seen_at_ms integer not null,
      expires_at_ms integer not null
    ) strict;
    create index sessions_by_user on sessions (user_id);
    create index sessions_by_expiry on sessions (expires_at_ms);

    create table tokens (
      id text primary key,
      user_id text not null references users on delete cascade,
      purpose text not null check (purpose in ('confirm', 'reset')),
      token_hash text not null unique,
      created_at_ms integer not null,
      expires_at_ms integer not null,
      used_at_ms integer
    ) strict;
    create index tokens_by_user on tokens (user_id, purpose);
    create index tokens_by_expiry on tokens (expires_at_ms);

    create table invites (
      id text primary key,
      email text not null,
      email_key text not null,
      role text not null check (role in ('coach', 'owner')),
      token_hash text not null unique,
      invited_by text not null references users,
      created_at_ms integer not null,
      expires_at_ms integer not null,
      accepted_at_ms integer,
      accepted_by text references users
    ) strict;
    create index invites_by_creation on invites (created_at_ms desc, id desc);
    create index invites_by_email on invites (email_key);

    create table students (
      user_id text primary key references users on delete cascade,
      birth_date text not null check (birth_date glob '[0-9][0-9][0-9][0-9]-[0-9][0-9]-[0-9][0-9]'),
      handedness text not null check (handedness in ('right', 'left')),
      limits text not null default ''
    ) strict;

    create table coaches (
      user_id text primary key references users on delete cascade,
      slug text not null unique,
      about text not null default '',
      is_open integer not null default 1 check (is_open in (0, 1))
    ) strict;

    create table guardianships (
      guardian_id text not null references users on delete cascade,
      junior_id text not null references users on delete cascade,
      created_at_ms integer not null,
      ended_at_ms integer,
      primary key (guardian_id, junior_id)
    ) strict;
    create index guardianships_by_junior on guardianships (junior_id);

    create table consents (
      id text primary key,
      junior_id text not null references users on delete cascade,
      guardian_id text not null references users on delete cascade,
      text_version text not null,
      given_at_ms integer not null,
      withdrawn_at_ms integer
    ) strict;
    create index consents_by_junior on consents (junior_id, given_at_ms);
  `),
}
