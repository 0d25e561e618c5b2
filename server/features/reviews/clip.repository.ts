import type { Insertable, Selectable, Updateable } from 'kysely'
import { sql } from 'kysely'
import type { ViewerFacts } from '#server/context'
import type { Database } from '#server/database/client'
import type { ClipsTable } from '#server/database/schema/reviews'
import { visibleTo } from './review.policy'

export type ClipRow = Selectable<ClipsTable>

/** All of a clip but its frame times, which are long and which no list shows. */
const BRIEF_COLUMNS = [
  'id', 'review_id', 'view', 'state', 'file_name', 'bytes', 'refusal', 'width_px', 'height_px', 'duration_ms', 'frames_per_second',
  'capture_frames_per_second', 'prepared_as', 'created_at_ms',
] as const satisfies readonly (keyof ClipRow)[]

export type ClipBriefRow = Pick<ClipRow, typeof BRIEF_COLUMNS[number]>

export async function listClips(db: Database, reviewId: string): Promise<ClipBriefRow[]> {
  return db.selectFrom('clips').select(BRIEF_COLUMNS).where('review_id', '=', reviewId).orderBy('created_at_ms').orderBy('id').execute()
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

/** Clips that were sent whole and are due to be read by whoever finds them: a server ended in between. */
export async function listUnreadClips(db: Database, nowMs: number, limit: number): Promise<ClipRow[]> {
  return db.selectFrom('clips').selectAll()
    .where('state', '=', sql.lit('reading')).where('read_due_at_ms', '<=', nowMs)
    .orderBy('read_due_at_ms')
    .limit(limit)
    .execute()
}

/** Takes a reading that is due, until `untilMs`. @returns whether nobody else took it since it was listed. */
export async function takeReading(db: Database, clip: ClipRow, untilMs: number): Promise<boolean> {
  const result = await db.updateTable('clips')
    .set({ read_due_at_ms: untilMs, read_attempts: clip.read_attempts + 1 })
    .where('id', '=', clip.id).where('state', '=', sql.lit('reading')).where('read_attempts', '=', clip.read_attempts)
    .executeTakeFirst()
  return result.numUpdatedRows === 1n
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

/** Notes that all parts are there and are being joined, so that somebody else can finish it. */
export async function markCompletionAsked(db: Database, clipId: string, atMs: number | null): Promise<void> {
  await db.updateTable('uploads').set({ completion_asked_at_ms: atMs }).where('clip_id', '=', clipId).execute()
}

/** Clips whose joining was begun before `beforeMs` and not finished. */
export async function listUnjoinedClips(db: Database, beforeMs: number, limit: number) {
  return db.selectFrom('uploads')
    .innerJoin('clips', 'clips.id', 'uploads.clip_id')
    .selectAll('clips')
    .select('uploads.store_upload_id')
    .where('uploads.completion_asked_at_ms', '<=', beforeMs)
    .where('clips.state', '=', 'uploading')
    .orderBy('uploads.completion_asked_at_ms')
    .limit(limit)
    .execute()
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
