import type { Migration } from 'kysely'
import { addedToOnly, runStatements } from './statements'

/**
 * What keeps the house running: letters to send, what was done, what was answered to a repeated request. Every move writes here, so each index is
 * one more page that its commit waits for: ids sort by time and serve as one, and old keys are found from the beginning of the table.
 */
export const running: Migration = {
  up: db => runStatements(db, `
    create table outbox (
      id text primary key,
      event_key text not null unique,
      letter text not null,
      subject_id text not null,
      user_id text references users on delete cascade,
      address text,
      secret text,
      message_id text not null,
      state text not null check (state in ('waiting', 'sent', 'given_up')),
      attempts integer not null default 0,
      due_at_ms integer not null,
      leased_until_ms integer,
      last_reason text,
      created_at_ms integer not null,
      expires_at_ms integer,
      sent_at_ms integer,
      check ((state = 'sent') = (sent_at_ms is not null)),
      check ((user_id is null) <> (address is null))
    ) strict;
    create index outbox_due on outbox (due_at_ms, id) where state = 'waiting';

    create table audit_events (
      id text primary key,
      at_ms integer not null,
      actor_id text,
      deed text not null,
      subject_id text,
      request_id text
    ) strict, without rowid;
    ${addedToOnly('audit_events')}

    create table viewings (
      id text primary key,
      clip_id text not null,
      viewer_id text not null,
      at_ms integer not null
    ) strict;
    create index viewings_by_clip on viewings (clip_id, at_ms desc);
    ${addedToOnly('viewings')}

    create table idempotency_keys (
      scope text not null,
      key text not null,
      request_hash text not null,
      answer text not null,
      created_at_ms integer not null,
      primary key (scope, key)
    ) strict;
  `),
}
