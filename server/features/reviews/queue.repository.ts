import { sql } from 'kysely'
import type { ViewerFacts } from '#server/context'
import type { Database } from '#server/database/client'
import { visibleTo } from './review.policy'

function openTurnarounds(db: Database, viewer: ViewerFacts) {
  return db.selectFrom('turnarounds')
    .innerJoin('reviews', 'reviews.id', 'turnarounds.review_id')
    .where('turnarounds.status', '<>', sql.lit('stopped'))
    .where(visibleTo(viewer))
}

/** Open turnarounds in order of promise, one more than `limit` when there are more. */
export async function listOpenTurnarounds(
  db: Database, viewer: ViewerFacts, { after, limit }: { after: { atMs: number, id: string } | undefined, limit: number },
) {
  return openTurnarounds(db, viewer)
    .innerJoin('users as student', 'student.id', 'reviews.student_id')
    .innerJoin('students', 'students.user_id', 'reviews.student_id')
    .leftJoin('users as coach', 'coach.id', 'reviews.coach_id')
    .select([
      'turnarounds.id', 'turnarounds.review_id', 'turnarounds.kind', 'turnarounds.status', 'turnarounds.calendar_id',
      'turnarounds.started_at_ms', 'turnarounds.promised_at_ms',
      'reviews.state', 'reviews.title', 'reviews.club', 'reviews.coach_id', 'reviews.film_asked_count',
      'student.name as student_name', 'student.time_zone as student_time_zone', 'students.birth_date',
      'coach.name as coach_name',
    ])
    .select(eb => eb.selectFrom('clips')
      .select(clip => clip.fn.agg<string>('group_concat', ['clips.view']).as('views'))
      .whereRef('clips.review_id', '=', 'reviews.id').where('clips.state', '=', 'accepted')
      .as('views'))
    .$if(after !== undefined, query => query.where(eb => eb(
      eb.refTuple('turnarounds.promised_at_ms', 'turnarounds.id'), '>', eb.tuple(after?.atMs ?? 0, after?.id ?? ''),
    )))
    .orderBy('turnarounds.promised_at_ms').orderBy('turnarounds.id')
    .limit(limit + 1)
    .execute()
}

export type QueueRecord = Awaited<ReturnType<typeof listOpenTurnarounds>>[number]

/** Open turnarounds, or those whose clock runs out by `dueBeforeMs`: one that stands still is not due. */
export async function countOpenTurnarounds(db: Database, viewer: ViewerFacts, dueBeforeMs: number | undefined): Promise<number> {
  const { count } = await openTurnarounds(db, viewer)
    .$if(dueBeforeMs !== undefined, query => query
      .where('turnarounds.promised_at_ms', '<=', dueBeforeMs ?? 0).where('turnarounds.status', '=', 'running'))
    .select(eb => eb.fn.countAll<number>().as('count'))
    .executeTakeFirstOrThrow()
  return count
}

/** What a coach still has to answer, as the estimate of a new promise needs it. */
export async function listPromisesAhead(db: Database, coachId: string | null, limit: number) {
  return db.selectFrom('turnarounds')
    .innerJoin('reviews', 'reviews.id', 'turnarounds.review_id')
    .select(['turnarounds.promised_at_ms', 'reviews.state'])
    // Said twice, and as a literal: SQLite finds the index on open turnarounds only by its own condition, never by a bound value.
    .where('turnarounds.status', '<>', sql.lit('stopped')).where('turnarounds.status', '=', 'running')
    .where(eb => coachId === null
      ? eb('reviews.chosen_coach_id', 'is', null)
      : eb.or([eb('reviews.chosen_coach_id', '=', coachId), eb('reviews.coach_id', '=', coachId)]))
    .orderBy('turnarounds.promised_at_ms').orderBy('turnarounds.id')
    .limit(limit)
    .execute()
}
