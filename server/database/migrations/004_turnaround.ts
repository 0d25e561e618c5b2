import type { Migration } from 'kysely'
import { addedToOnly, runStatements } from './statements'

/** Working hours as they were at each time, and the promises made on them. */
export const turnaround: Migration = {
  up: db => runStatements(db, `
    create table calendars (
      id text primary key,
      coach_id text references users,
      version integer not null check (version >= 1),
      time_zone text not null,
      weekly text not null check (json_valid(weekly)),
      time_off text not null check (json_valid(time_off)),
      created_at_ms integer not null
    ) strict;
    create unique index calendars_by_owner on calendars (ifnull(coach_id, ''), version desc);
    ${addedToOnly('calendars')}

    create table turnarounds (
      id text primary key,
      review_id text not null references reviews on delete cascade,
      kind text not null check (kind in ('answer', 'follow_up', 'check_in')),
      sequence integer not null check (sequence >= 1),
      status text not null check (status in ('running', 'paused', 'stopped')),
      calendar_id text not null references calendars,
      turnaround_ms integer not null check (turnaround_ms > 0),
      started_at_ms integer not null,
      promised_at_ms integer not null,
      stopped_at_ms integer,
      unique (review_id, kind, sequence),
      check ((status = 'stopped') = (stopped_at_ms is not null))
    ) strict;
    create index turnarounds_open on turnarounds (promised_at_ms, id) where status <> 'stopped';

    create table turnaround_events (
      id text not null,
      turnaround_id text not null,
      kind text not null check (kind in ('started', 'paused', 'resumed', 'stopped', 'missed', 'coach-changed')),
      at_ms integer not null,
      calendar_id text not null references calendars,
      promised_at_ms integer not null,
      actor_id text,
      primary key (turnaround_id, at_ms, id)
    ) strict, without rowid;
    ${addedToOnly('turnaround_events')}
  `),
}
