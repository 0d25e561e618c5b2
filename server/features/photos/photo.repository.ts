import type { Insertable, Selectable } from 'kysely'
import type { ViewerFacts } from '#server/context'
import type { Database } from '#server/database/client'
import type { PhotosTable } from '#server/database/schema/reviews'
import { visibleTo } from '#server/features/reviews/review.policy'

export type PhotoRow = Selectable<PhotosTable>

export async function listPhotos(db: Database, reviewId: string): Promise<PhotoRow[]> {
  return db.selectFrom('photos').selectAll().where('review_id', '=', reviewId).orderBy('created_at_ms').orderBy('id').execute()
}

/** A photograph of a review that the viewer may see, with what access rules ask about the review. */
export async function findVisiblePhoto(db: Database, viewer: ViewerFacts, id: string) {
  return db.selectFrom('photos')
    .innerJoin('reviews', 'reviews.id', 'photos.review_id')
    .selectAll('photos')
    .select(['reviews.student_id', 'reviews.state as review_state'])
    .where('photos.id', '=', id)
    .where(visibleTo(viewer))
    .executeTakeFirst()
}

export async function insertPhoto(db: Database, row: Insertable<PhotosTable>): Promise<void> {
  await db.insertInto('photos').values(row).execute()
}

/** @returns whether it was there. */
export async function deletePhoto(db: Database, id: string): Promise<boolean> {
  const result = await db.deleteFrom('photos').where('id', '=', id).executeTakeFirst()
  return result.numDeletedRows === 1n
}
