import type { Migration } from 'kysely'
import { addedToOnly, runStatements } from './statements'

/** Orders, what they moved, and what is to be given back. */
export const money: Migration = {
  up: db => runStatements(db, `
    create table orders (
      id text primary key,
      student_id text references users on delete set null,
      review_id text references reviews on delete set null,
      offer_version_id text not null references offer_versions,
      state text not null check (state in ('open', 'paid', 'expired', 'duplicate')),
      amount_minor integer not null check (amount_minor > 0),
      currency text not null check (length(currency) = 3),
      quoted_promise_at_ms integer not null,
      quoted_at_ms integer not null,
      checkout_id text unique,
      checkout_url text,
      checkout_expires_at_ms integer not null,
      payment_id text unique,
      look_at_ms integer not null,
      created_at_ms integer not null,
      settled_at_ms integer,
      refunded_minor integer not null default 0 check (refunded_minor between 0 and amount_minor),
      disputed_at_ms integer,
      check ((state = 'open') = (settled_at_ms is null))
    ) strict;
    create index orders_by_review on orders (review_id, created_at_ms desc);
    create index orders_by_student on orders (student_id, created_at_ms desc, id desc);
    create index orders_to_look_at on orders (look_at_ms, id) where state = 'open';

    create table ledger_entries (
      id text primary key,
      movement_id text not null,
      account text not null check (account in ('card', 'owed', 'coach', 'studio')),
      amount_minor integer not null check (amount_minor <> 0),
      currency text not null check (length(currency) = 3),
      reason text not null check (reason in ('sale', 'refund', 'earned')),
      order_id text not null,
      review_id text,
      coach_id text,
      at_ms integer not null
    ) strict;
    create unique index ledger_entries_once on ledger_entries (movement_id, account);
    create index ledger_entries_by_order on ledger_entries (order_id, at_ms);
    ${addedToOnly('ledger_entries')}

    create table refunds (
      id text primary key,
      order_id text not null references orders,
      amount_minor integer not null check (amount_minor > 0),
      reason text not null check (reason in ('paid-twice', 'withdrawn', 'nothing-to-pay-for')),
      state text not null check (state in ('wanted', 'done', 'failed')),
      attempts integer not null default 0,
      due_at_ms integer not null,
      last_reason text,
      created_at_ms integer not null,
      done_at_ms integer,
      check ((state = 'done') = (done_at_ms is not null))
    ) strict;
    create index refunds_due on refunds (due_at_ms, id) where state = 'wanted';
    create index refunds_by_order on refunds (order_id);

    alter table credits add column order_id text references orders;
    alter table credits add column value_minor integer not null default 0 check (value_minor >= 0);
    alter table coaches add column share_percent integer not null default 60 check (share_percent between 0 and 100);
  `),
}
