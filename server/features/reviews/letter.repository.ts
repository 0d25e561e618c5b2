import type { Insertable, Selectable } from 'kysely'
import type { Letter } from '#shared/domain/review/letter'
import type { Database } from '#server/database/client'
import type { DiagnosesTable, DraftsTable, PrescriptionsTable } from '#server/database/schema/reviews'

export type DraftRow = Selectable<DraftsTable>

export async function findDraft(db: Database, reviewId: string, coachId: string): Promise<DraftRow | undefined> {
  return db.selectFrom('drafts').selectAll().where('review_id', '=', reviewId).where('coach_id', '=', coachId).executeTakeFirst()
}

/**
 * Saves a draft over the version that it was written on; 0 stands for none.
 * @returns whether that version was still the newest.
 */
export async function saveDraftOver(db: Database, draft: { reviewId: string, coachId: string, version: number, letter: string, nowMs: number }): Promise<boolean> {
  if (draft.version === 0) {
    const result = await db.insertInto('drafts')
      .values({ review_id: draft.reviewId, coach_id: draft.coachId, version: 1, letter: draft.letter, saved_at_ms: draft.nowMs })
      .onConflict(conflict => conflict.doNothing())
      .executeTakeFirst()
    return result.numInsertedOrUpdatedRows === 1n
  }
  const result = await db.updateTable('drafts')
    .set({ letter: draft.letter, saved_at_ms: draft.nowMs, version: draft.version + 1 })
    .where('review_id', '=', draft.reviewId).where('coach_id', '=', draft.coachId).where('version', '=', draft.version)
    .executeTakeFirst()
  return result.numUpdatedRows === 1n
}

/** The newest letter of a review; a second one follows when the first did not answer the question. */
export async function findLetter(db: Database, reviewId: string) {
  return db.selectFrom('diagnoses')
    .innerJoin('prescriptions', 'prescriptions.diagnosis_id', 'diagnoses.id')
    .innerJoin('users as coach', 'coach.id', 'diagnoses.coach_id')
    .selectAll('diagnoses')
    .select(['prescriptions.drill_title', 'prescriptions.drill_steps', 'prescriptions.drill_dose', 'coach.name as coach_name', 'coach.picture_key as coach_picture_key'])
    .where('diagnoses.review_id', '=', reviewId)
    .orderBy('sequence', 'desc')
    .limit(1)
    .executeTakeFirst()
}

/** The letter as it is written in, from the columns that diagnosis and prescription keep it in. */
export function toLetter(row: LetterColumns): Letter {
  return {
    leaveAlone: row.leave_alone,
    saw: row.saw,
    why: row.why,
    howSure: row.how_sure,
    oneChange: row.one_change,
    drillTitle: row.drill_title,
    drillSteps: row.drill_steps,
    drillDose: row.drill_dose,
    caution: row.caution,
  }
}

type LetterColumns
  = Pick<Selectable<DiagnosesTable>, 'leave_alone' | 'saw' | 'why' | 'how_sure' | 'one_change' | 'caution'>
    & Pick<Selectable<PrescriptionsTable>, 'drill_title' | 'drill_steps' | 'drill_dose'>

export type LetterRecord = NonNullable<Awaited<ReturnType<typeof findLetter>>>

export async function countLetters(db: Database, reviewId: string): Promise<number> {
  const { count } = await db.selectFrom('diagnoses')
    .select(eb => eb.fn.countAll<number>().as('count'))
    .where('review_id', '=', reviewId)
    .executeTakeFirstOrThrow()
  return count
}

export async function insertLetter(db: Database, diagnosis: Insertable<DiagnosesTable>, prescription: Insertable<PrescriptionsTable>): Promise<void> {
  await db.insertInto('diagnoses').values(diagnosis).execute()
  await db.insertInto('prescriptions').values(prescription).execute()
}
