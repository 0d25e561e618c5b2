import type { Insertable, Selectable } from 'kysely'
import type { Database } from '#server/database/client'
import type { SwingsTable } from '#server/database/schema/reviews'
import { newId } from '#server/ids'

export type SwingRow = Selectable<SwingsTable>

export async function listSwings(db: Database, clipId: string): Promise<SwingRow[]> {
  return db.selectFrom('swings').selectAll().where('clip_id', '=', clipId).orderBy('number').execute()
}

/** The swings of all clips of a review, in no order. */
export async function listSwingsOfReview(db: Database, reviewId: string): Promise<SwingRow[]> {
  return db.selectFrom('swings')
    .innerJoin('clips', 'clips.id', 'swings.clip_id')
    .selectAll('swings')
    .where('clips.review_id', '=', reviewId)
    .execute()
}

/** The one swing that every accepted clip holds until its student says more: all of it. */
export async function insertImpliedSwing(db: Database, { clipId, durationMs, nowMs }: { clipId: string, durationMs: number, nowMs: number }): Promise<void> {
  await db.insertInto('swings')
    .values({ id: newId(nowMs), clip_id: clipId, number: 1, from_ms: 0, to_ms: Math.max(1, durationMs) })
    .execute()
}

/** Makes these the clip's swings. A number that was there keeps its id, since marks belong to it. */
export async function replaceSwings(db: Database, clipId: string, rows: Omit<Insertable<SwingsTable>, 'id' | 'clip_id'>[], nowMs: number): Promise<void> {
  await db.deleteFrom('swings').where('clip_id', '=', clipId).where('number', '>', rows.length).execute()
  for (const row of rows) {
    await db.insertInto('swings')
      .values({ ...row, id: newId(nowMs), clip_id: clipId })
      .onConflict(conflict => conflict.columns(['clip_id', 'number']).doUpdateSet(row))
      .execute()
  }
}
