import type { Insertable } from 'kysely'
import type { Database } from '#server/database/client'
import type { CreditsTable } from '#server/database/schema/offers'

/** The credit to spend next, with the terms under which it was sold. */
export async function findOldestCredit(db: Database, studentId: string) {
  return db.selectFrom('credits')
    .innerJoin('offer_versions', 'offer_versions.id', 'credits.offer_version_id')
    .select(['credits.id', 'credits.offer_version_id', 'offer_versions.turnaround_ms'])
    .where('credits.student_id', '=', studentId).where('credits.spent_at_ms', 'is', null)
    .orderBy('credits.granted_at_ms').orderBy('credits.id')
    .limit(1)
    .executeTakeFirst()
}

/** The credit that an order brought for the review that it was made for. */
export async function findCreditOfOrder(db: Database, orderId: string) {
  return db.selectFrom('credits')
    .innerJoin('offer_versions', 'offer_versions.id', 'credits.offer_version_id')
    .select(['credits.id', 'credits.offer_version_id', 'offer_versions.turnaround_ms'])
    .where('credits.order_id', '=', orderId).where('credits.spent_at_ms', 'is', null)
    .orderBy('credits.id')
    .limit(1)
    .executeTakeFirst()
}

/** The credit that a review was paid with, with what it is worth and the order that it came from. */
export async function findSpentCredit(db: Database, reviewId: string) {
  return db.selectFrom('credits')
    .innerJoin('offer_versions', 'offer_versions.id', 'credits.offer_version_id')
    .innerJoin('offers', 'offers.id', 'offer_versions.offer_id')
    .select(['credits.id', 'credits.order_id', 'credits.value_minor', 'offer_versions.currency', 'offers.kind'])
    .where('credits.spent_review_id', '=', reviewId)
    .executeTakeFirst()
}

/** A credit whose review was withdrawn can be used again. */
export async function giveCreditBack(db: Database, id: string): Promise<void> {
  await db.updateTable('credits').set({ spent_at_ms: null, spent_review_id: null }).where('id', '=', id).execute()
}

/** Credits whose money went back are nobody's. */
export async function deleteUnspentCredits(db: Database, orderId: string): Promise<void> {
  await db.deleteFrom('credits').where('order_id', '=', orderId).where('spent_at_ms', 'is', null).execute()
}

/** @throws when the credit was spent meanwhile; within one transaction that cannot be. */
export async function spendCredit(db: Database, id: string, reviewId: string, nowMs: number): Promise<void> {
  const result = await db.updateTable('credits')
    .set({ spent_at_ms: nowMs, spent_review_id: reviewId })
    .where('id', '=', id).where('spent_at_ms', 'is', null)
    .executeTakeFirst()
  if (result.numUpdatedRows !== 1n) throw new Error(`Credit ${id} was spent before.`)
}

export async function insertCredit(db: Database, row: Insertable<CreditsTable>): Promise<void> {
  await db.insertInto('credits').values(row).execute()
}

export async function countCreditsLeft(db: Database, studentId: string): Promise<number> {
  const { count } = await db.selectFrom('credits')
    .select(eb => eb.fn.countAll<number>().as('count'))
    .where('student_id', '=', studentId).where('spent_at_ms', 'is', null)
    .executeTakeFirstOrThrow()
  return count
}
