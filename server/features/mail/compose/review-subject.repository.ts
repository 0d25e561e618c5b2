import type { Database } from '#server/database/client'

/** A submitted review as the letters to student and coach tell of it, with the promise that holds for its answer. */
export async function findWaitingSubject(db: Database, reviewId: string) {
  return db.selectFrom('reviews')
    .innerJoin('users as student', 'student.id', 'reviews.student_id')
    .leftJoin('users as chosen', 'chosen.id', 'reviews.chosen_coach_id')
    .innerJoin('turnarounds', join => join
      .onRef('turnarounds.review_id', '=', 'reviews.id').on('turnarounds.kind', '=', 'answer').on('turnarounds.status', '<>', 'stopped'))
    .select([
      'reviews.id', 'reviews.state', 'reviews.coach_id', 'reviews.student_id', 'reviews.title', 'student.name as student_name',
      'chosen.name as chosen_coach_name', 'turnarounds.promised_at_ms',
    ])
    .where('reviews.id', '=', reviewId)
    .orderBy('turnarounds.sequence', 'desc')
    .limit(1)
    .executeTakeFirst()
}

/** An answer as the letter to student and guardian tells of it. */
export async function findAnswerSubject(db: Database, diagnosisId: string) {
  return db.selectFrom('diagnoses')
    .innerJoin('prescriptions', 'prescriptions.diagnosis_id', 'diagnoses.id')
    .innerJoin('reviews', 'reviews.id', 'diagnoses.review_id')
    .innerJoin('users as student', 'student.id', 'reviews.student_id')
    .innerJoin('users as coach', 'coach.id', 'diagnoses.coach_id')
    .select([
      'diagnoses.review_id', 'diagnoses.title', 'diagnoses.leave_alone', 'diagnoses.saw', 'diagnoses.why', 'diagnoses.how_sure',
      'diagnoses.one_change', 'diagnoses.caution', 'prescriptions.drill_title', 'prescriptions.drill_steps', 'prescriptions.drill_dose',
      'reviews.student_id', 'student.name as student_name', 'coach.name as coach_name',
    ])
    .where('diagnoses.id', '=', diagnosisId)
    .executeTakeFirst()
}
