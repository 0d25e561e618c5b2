import type { Insertable, Updateable } from 'kysely'
import type { ViewerFacts } from '#server/context'
import type { Database } from '#server/database/client'
import type { ReviewsTable } from '#server/database/schema/reviews'
import { visibleTo } from './review.policy'

/** A review with the names that every screen of it shows. */
function selectReviews(db: Database) {
  return db.selectFrom('reviews')
    .innerJoin('users as student', 'student.id', 'reviews.student_id')
    .innerJoin('students', 'students.user_id', 'reviews.student_id')
    // One row: who counts as a junior is the studio's setting.
    .innerJoin('studio', join => join.on('studio.id', '=', 1))
    .leftJoin('users as coach', 'coach.id', 'reviews.coach_id')
    .leftJoin('users as chosen', 'chosen.id', 'reviews.chosen_coach_id')
    .selectAll('reviews')
    .select([
      'student.name as student_name',
      'student.picture_key as student_picture_key',
      'student.time_zone as student_time_zone',
      'students.birth_date',
      'students.handedness',
      'students.limits',
      'studio.adult_age',
      'coach.name as coach_name',
      'coach.picture_key as coach_picture_key',
      'chosen.name as chosen_name',
      'chosen.picture_key as chosen_picture_key',
    ])
}

export type ReviewRecord = NonNullable<Awaited<ReturnType<typeof findVisibleReview>>>

export async function findVisibleReview(db: Database, viewer: ViewerFacts, id: string) {
  return selectReviews(db).where('reviews.id', '=', id).where(visibleTo(viewer)).executeTakeFirst()
}

/** For letters, which are written in nobody's name. */
export async function findReview(db: Database, id: string) {
  return selectReviews(db).where('reviews.id', '=', id).executeTakeFirst()
}

export async function insertReview(db: Database, row: Insertable<ReviewsTable>): Promise<void> {
  await db.insertInto('reviews').values(row).execute()
}

/** Changes a review that is still in the state it was read in, and counts its version up. @returns whether it was. */
export async function updateReview(
  db: Database, id: string, state: ReviewsTable['state'], change: Updateable<ReviewsTable>,
): Promise<boolean> {
  const result = await db.updateTable('reviews')
    .set(change)
    .set(eb => ({ version: eb('version', '+', 1) }))
    .where('id', '=', id).where('state', '=', state)
    .executeTakeFirst()
  return result.numUpdatedRows === 1n
}

/** Numbers a student's reviews from 1. */
export async function nextReviewNumber(db: Database, studentId: string): Promise<number> {
  const { last } = await db.selectFrom('reviews')
    .select(eb => eb.fn.max('number').as('last'))
    .where('student_id', '=', studentId)
    .executeTakeFirstOrThrow()
  return (last ?? 0) + 1
}

export interface ListReviews {
  states: ReviewsTable['state'][] | undefined
  after: { atMs: number, id: string } | undefined
  limit: number
}

/** Newest first, one more than `limit` when there are more. */
export async function listVisibleReviews(db: Database, viewer: ViewerFacts, { states, after, limit }: ListReviews) {
  return db.selectFrom('reviews')
    .innerJoin('users as student', 'student.id', 'reviews.student_id')
    .leftJoin('users as coach', 'coach.id', 'reviews.coach_id')
    .leftJoin('turnarounds', join => join
      .onRef('turnarounds.review_id', '=', 'reviews.id').on('turnarounds.kind', '=', 'answer').on('turnarounds.sequence', '=', 1))
    .select([
      'reviews.id', 'reviews.number', 'reviews.state', 'reviews.title', 'reviews.club', 'reviews.created_at_ms', 'reviews.answered_at_ms',
      'student.name as student_name', 'coach.name as coach_name', 'turnarounds.promised_at_ms',
    ])
    .where(visibleTo(viewer))
    .$if(states !== undefined, query => query.where('reviews.state', 'in', states ?? []))
    .$if(after !== undefined, query => query.where(eb => eb(
      eb.refTuple('reviews.created_at_ms', 'reviews.id'), '<', eb.tuple(after?.atMs ?? 0, after?.id ?? ''),
    )))
    .orderBy('reviews.created_at_ms', 'desc').orderBy('reviews.id', 'desc')
    .limit(limit + 1)
    .execute()
}

/** How long the coach's last answers took from taking up to sending, newest first. */
export async function listReviewTimesMs(db: Database, coachId: string, limit: number): Promise<number[]> {
  const rows = await db.selectFrom('reviews')
    .select(eb => eb('answered_at_ms', '-', eb.ref('taken_up_at_ms')).as('took_ms'))
    .where('coach_id', '=', coachId)
    .where('answered_at_ms', 'is not', null).where('taken_up_at_ms', 'is not', null)
    .orderBy('answered_at_ms', 'desc')
    .limit(limit)
    .execute()
  return rows.flatMap(row => row.took_ms === null ? [] : [row.took_ms])
}
