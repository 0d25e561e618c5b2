import type { Migration } from 'kysely'
import { addedToOnly, runStatements } from './statements'

/** What is sold, and reviews paid for in advance. A sold version never changes: a new price is a new version. */
export const offers: Migration = {
  up: db => runStatements(db, `
    create table offers (
      id text primary key,
      kind text not null check (kind in ('single', 'series')),
      is_sold integer not null default 1 check (is_sold in (0, 1)),
      sort_order integer not null default 0
    ) strict;

    create table offer_versions (
      id text primary key,
      offer_id text not null references offers,
      version integer not null check (version >= 1),
      name text not null,
      review_count integer not null check (review_count between 1 and 50),
      price_minor integer not null check (price_minor >= 0),
      currency text not null check (length(currency) = 3),
      turnaround_ms integer not null check (turnaround_ms > 0),
      follow_ups_included integer not null check (follow_ups_included >= 0),
      created_at_ms integer not null,
      unique (offer_id, version)
    ) strict;
    ${addedToOnly('offer_versions')}

    create table credits (
      id text primary key,
      student_id text not null references users on delete cascade,
      offer_version_id text not null references offer_versions,
      granted_at_ms integer not null,
      spent_at_ms integer,
      spent_review_id text unique,
      check ((spent_at_ms is null) = (spent_review_id is null))
    ) strict;
    create index credits_left on credits (student_id, granted_at_ms, id) where spent_at_ms is null;

    create table provider_events (
      id text primary key,
      type text not null,
      object_id text not null,
      created_at_ms integer not null,
      received_at_ms integer not null
    ) strict;
    ${addedToOnly('provider_events')}
  `),
}
