import type { Insertable, Selectable, Updateable } from 'kysely'
import type { ViewerFacts } from '#server/context'
import type { Database } from '#server/database/client'
import type { ClipsTable } from '#server/database/schema/reviews'
import { visibleTo } from './review.policy'

export type ClipRow = Selectable<ClipsTable>

export async function listClips(db: Database, reviewId: string): Promise<ClipRow[]> {
  return db.selectFrom('clips').selectAll().where('review_id', '=', reviewId).orderBy('created_at_ms').orderBy('id').execute()
}

/** A clip of a review that the viewer may see, with what access rules ask about the review. */
export async function findVisibleClip(db: Database, viewer: ViewerFacts, id: string) {
  return db.selectFrom('clips')
    .innerJoin('reviews', 'reviews.id', 'clips.review_id')
    .leftJoin('uploads', 'uploads.clip_id', 'clips.id')
    .selectAll('clips')
    .select(['reviews.student_id', 'reviews.state as review_state', 'uploads.store_upload_id', 'uploads.part_bytes'])
    .where('clips.id', '=', id)
    .where(visibleTo(viewer))
    .executeTakeFirst()
}

export type ClipRecord = NonNullable<Awaited<ReturnType<typeof findVisibleClip>>>

/** Clips that were sent whole but not read since `beforeMs`: a server ended in between. */
export async function listUnreadClips(db: Database, beforeMs: number, limit: number): Promise<ClipRow[]> {
  return db.selectFrom('clips').selectAll()
    .where('state', '=', 'reading').where('completed_at_ms', '<', beforeMs)
    .orderBy('completed_at_ms')
    .limit(limit)
    .execute()
}

export async function insertClip(db: Database, row: Insertable<ClipsTable>, upload: { storeUploadId: string, partBytes: number }): Promise<void> {
  await db.insertInto('clips').values(row).execute()
  await db.insertInto('uploads')
    .values({ clip_id: row.id, store_upload_id: upload.storeUploadId, part_bytes: upload.partBytes, created_at_ms: row.created_at_ms })
    .execute()
}

/** Changes a clip that is still in `state`. @returns whether it was. */
export async function updateClip(db: Database, id: string, state: ClipsTable['state'], change: Updateable<ClipsTable>): Promise<boolean> {
  const result = await db.updateTable('clips').set(change).where('id', '=', id).where('state', '=', state).executeTakeFirst()
  return result.numUpdatedRows === 1n
}

export async function deleteUpload(db: Database, clipId: string): Promise<void> {
  await db.deleteFrom('uploads').where('clip_id', '=', clipId).execute()
}

export async function deleteClip(db: Database, id: string): Promise<void> {
  await db.deleteFrom('clips').where('id', '=', id).execute()
}

export async function insertViewing(db: Database, row: { id: string, clipId: string, viewerId: string, atMs: number }): Promise<void> {
  await db.insertInto('viewings').values({ id: row.id, clip_id: row.clipId, viewer_id: row.viewerId, at_ms: row.atMs }).execute()
}
