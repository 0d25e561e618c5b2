import type { Insertable } from 'kysely'
import { sql } from 'kysely'
import type { Database } from '#server/database/client'
import type { RefundsTable } from '#server/database/schema/money'

export async function insertRefund(db: Database, row: Insertable<RefundsTable>): Promise<void> {
  await db.insertInto('refunds').values(row).execute()
}

/** Money that is to be given back now, with the payment that it came from. */
export async function listRefundsDue(db: Database, nowMs: number, limit: number) {
  return db.selectFrom('refunds')
    .innerJoin('orders', 'orders.id', 'refunds.order_id')
    .selectAll('refunds')
    .select(['orders.payment_id', 'orders.student_id'])
    .where('refunds.state', '=', sql.lit('wanted')).where('refunds.due_at_ms', '<=', nowMs)
    .orderBy('refunds.due_at_ms').orderBy('refunds.id')
    .limit(limit)
    .execute()
}

/** A refund with its currency, for the letter that tells of it. */
export async function findRefund(db: Database, id: string) {
  return db.selectFrom('refunds')
    .innerJoin('orders', 'orders.id', 'refunds.order_id')
    .selectAll('refunds')
    .select(['orders.currency', 'orders.student_id'])
    .where('refunds.id', '=', id)
    .executeTakeFirst()
}

export type RefundRecord = Awaited<ReturnType<typeof listRefundsDue>>[number]

export async function markRefundDone(db: Database, id: string, nowMs: number): Promise<void> {
  await db.updateTable('refunds').set({ state: 'done', done_at_ms: nowMs, last_reason: null }).where('id', '=', id).execute()
}

export async function markRefundFailed(db: Database, id: string, reason: string): Promise<void> {
  await db.updateTable('refunds').set({ state: 'failed', last_reason: reason }).where('id', '=', id).execute()
}

export async function postponeRefund(db: Database, id: string, attempts: number, dueAtMs: number, reason: string): Promise<void> {
  await db.updateTable('refunds').set({ attempts, due_at_ms: dueAtMs, last_reason: reason }).where('id', '=', id).execute()
}

/** What of an order is promised back but has not gone back yet. */
export async function sumWantedMinor(db: Database, orderId: string): Promise<number> {
  const { sum } = await db.selectFrom('refunds')
    .select(eb => eb.fn.sum<number | null>('amount_minor').as('sum'))
    .where('order_id', '=', orderId).where('state', '=', 'wanted')
    .executeTakeFirstOrThrow()
  return sum ?? 0
}
