import type { Database } from '#server/database/client'

/** Who gets a letter, and whether as the guardian of the person it is about. */
export interface Recipient {
  userId: string
  isGuardian: boolean
}

/**
 * Everyone who gets a letter about a student's affairs: the student, and for as long as a guardianship holds each guardian too.
 * Every letter about a review takes its readers from here, so that nothing reaches a junior alone.
 */
export async function recipientsOf(db: Database, studentId: string): Promise<Recipient[]> {
  const guardians = await db.selectFrom('guardianships')
    .select('guardian_id')
    .where('junior_id', '=', studentId).where('ended_at_ms', 'is', null)
    .execute()
  return [{ userId: studentId, isGuardian: false }, ...guardians.map(row => ({ userId: row.guardian_id, isGuardian: true }))]
}
