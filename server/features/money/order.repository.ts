import type { Insertable, Selectable, Updateable } from 'kysely'
import { sql } from 'kysely'
import type { Database } from '#server/database/client'
import type { OrdersTable } from '#server/database/schema/money'

export type OrderRow = Selectable<OrdersTable>

export async function insertOrder(db: Database, row: Insertable<OrdersTable>): Promise<void> {
  await db.insertInto('orders').values(row).execute()
}

/** An order with the terms under which it was made. */
export async function findOrder(db: Database, id: string) {
  return db.selectFrom('orders')
    .innerJoin('offer_versions', 'offer_versions.id', 'orders.offer_version_id')
    .innerJoin('offers', 'offers.id', 'offer_versions.offer_id')
    .selectAll('orders')
    .select(['offers.kind', 'offer_versions.name as offer_name', 'offer_versions.review_count', 'offer_versions.turnaround_ms'])
    .where('orders.id', '=', id)
    .executeTakeFirst()
}

export type OrderRecord = NonNullable<Awaited<ReturnType<typeof findOrder>>>

export async function findOrderIdByPayment(db: Database, paymentId: string): Promise<string | undefined> {
  return (await db.selectFrom('orders').select('id').where('payment_id', '=', paymentId).executeTakeFirst())?.id
}

export async function findOrderIdByCheckout(db: Database, checkoutId: string): Promise<string | undefined> {
  return (await db.selectFrom('orders').select('id').where('checkout_id', '=', checkoutId).executeTakeFirst())?.id
}

/** The page that a review could be paid on now, if there is one. */
export async function findOpenOrder(db: Database, reviewId: string): Promise<OrderRow | undefined> {
  return db.selectFrom('orders').selectAll()
    .where('review_id', '=', reviewId).where('state', '=', 'open')
    .orderBy('created_at_ms', 'desc')
    .limit(1)
    .executeTakeFirst()
}

/** Every order of a review, newest first; there are as many as times somebody went to pay. */
export async function listOrderIds(db: Database, reviewId: string): Promise<string[]> {
  const rows = await db.selectFrom('orders').select('id').where('review_id', '=', reviewId).orderBy('created_at_ms', 'desc').limit(50).execute()
  return rows.map(row => row.id)
}

/** Orders of which nothing has been heard for a while. */
export async function listOrdersToLookAt(db: Database, nowMs: number, limit: number): Promise<OrderRow[]> {
  return db.selectFrom('orders').selectAll()
    .where('state', '=', sql.lit('open')).where('look_at_ms', '<=', nowMs)
    .orderBy('look_at_ms').orderBy('id')
    .limit(limit)
    .execute()
}

export async function updateOrder(db: Database, id: string, change: Updateable<OrdersTable>): Promise<void> {
  await db.updateTable('orders').set(change).where('id', '=', id).execute()
}
