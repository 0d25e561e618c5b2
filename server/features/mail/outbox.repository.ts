import type { Insertable, Selectable } from 'kysely'
import { sql } from 'kysely'
import type { Database } from '#server/database/client'
import type { OutboxTable } from '#server/database/schema/running'

export type OutboxRow = Selectable<OutboxTable>

/** A letter for an event and a reader is queued once, however often the event is told. */
export async function insertLetter(db: Database, row: Insertable<OutboxTable>): Promise<void> {
  await db.insertInto('outbox').values(row).onConflict(conflict => conflict.column('event_key').doNothing()).execute()
}

/** Leases up to `limit` letters that are due, so that a second sender leaves them alone until the lease ends. */
export async function claimDueLetters(db: Database, nowMs: number, limit: number, leaseMs: number): Promise<OutboxRow[]> {
  return db.updateTable('outbox')
    .set({ leased_until_ms: nowMs + leaseMs, due_at_ms: nowMs + leaseMs })
    .where('id', 'in', db.selectFrom('outbox').select('id')
      .where('state', '=', sql.lit('waiting')).where('due_at_ms', '<=', nowMs)
      .orderBy('due_at_ms').orderBy('id').limit(limit))
    .returningAll()
    .execute()
}

/** The link's secret leaves the database with the letter. */
export async function markSent(db: Database, id: string, nowMs: number): Promise<void> {
  await db.updateTable('outbox')
    .set({ state: 'sent', sent_at_ms: nowMs, secret: null, leased_until_ms: null, last_reason: null })
    .where('id', '=', id).execute()
}

export async function markForLater(db: Database, id: string, attempts: number, dueAtMs: number, reason: string): Promise<void> {
  await db.updateTable('outbox')
    .set({ attempts, due_at_ms: dueAtMs, leased_until_ms: null, last_reason: reason })
    .where('id', '=', id).execute()
}

export async function markGivenUp(db: Database, id: string, attempts: number, reason: string): Promise<void> {
  await db.updateTable('outbox')
    .set({ state: 'given_up', attempts, secret: null, leased_until_ms: null, last_reason: reason })
    .where('id', '=', id).execute()
}
