import { ageInYears } from '#shared/domain/people/age'
import type { Ctx } from '#server/context'
import type { Database } from '#server/database/client'
import { getStudio } from '#server/features/people/studio.repository'
import { consentNeeded } from './film.errors'

/**
 * The gate before every sending, submitting and showing of film: a junior's needs a guardian's consent that is alive at this moment.
 * @throws Refusal `consent-needed`.
 */
export async function checkFilmConsent(db: Database, ctx: Ctx, studentId: string): Promise<void> {
  const student = await db.selectFrom('students')
    .innerJoin('users', 'users.id', 'students.user_id')
    .select(['students.birth_date', 'users.time_zone'])
    .where('students.user_id', '=', studentId)
    .executeTakeFirstOrThrow()
  const { adult_age: adultAge } = await getStudio(db)
  if (ageInYears(student.birth_date, ctx.nowMs, student.time_zone) >= adultAge) return
  const consent = await db.selectFrom('consents')
    .innerJoin('guardianships', join => join
      .onRef('guardianships.junior_id', '=', 'consents.junior_id').onRef('guardianships.guardian_id', '=', 'consents.guardian_id'))
    .select('consents.id')
    .where('consents.junior_id', '=', studentId)
    .where('consents.given_at_ms', '<=', ctx.nowMs).where('consents.withdrawn_at_ms', 'is', null)
    .where('guardianships.ended_at_ms', 'is', null)
    .limit(1)
    .executeTakeFirst()
  if (!consent) throw consentNeeded()
}
