import { z } from 'zod'
import { PRACTICE_PLACES } from '#shared/domain/people/practice-places'
import type { ProfileInput } from '#shared/schemas/profile'
import type { ProfileView } from '#shared/types/profile'
import type { SignedInCtx } from '#server/context'
import type { Database } from '#server/database/client'
import { recordDeed } from '#server/features/audit'
import { notFound } from '#server/refusal'
import { write } from '#server/write'
import { findStudent, listClubs, replaceClubs, updateStudent } from './profile.repository'

const storedPlaces = z.array(z.enum(PRACTICE_PLACES))

/** What the student says once. @throws Refusal `not-found` for somebody who is no student. */
export async function readProfile(ctx: SignedInCtx): Promise<ProfileView> {
  return getProfile(ctx.db, ctx.viewer.id)
}

/** All of it at once: what is left out of the clubs is gone. */
export async function changeProfile(ctx: SignedInCtx, input: ProfileInput): Promise<ProfileView> {
  const studentId = ctx.viewer.id
  return write(ctx, async (db) => {
    await updateStudent(db, studentId, {
      handedness: input.handedness,
      handicap: input.handicap,
      limits: input.limits,
      goals: input.goals,
      practice_places: JSON.stringify(input.practicePlaces),
      sessions_per_week: input.sessionsPerWeek,
      minutes_per_session: input.minutesPerSession,
    })
    await replaceClubs(db, studentId, input.clubs.map((club, index) => ({
      student_id: studentId, position: index + 1, club: club.club, length_m: club.lengthM, lie_deg: club.lieDeg, carry_m: club.carryM,
    })))
    await recordDeed(db, ctx, 'profile-changed', studentId)
    return getProfile(db, studentId)
  })
}

async function getProfile(db: Database, studentId: string): Promise<ProfileView> {
  const student = await findStudent(db, studentId)
  if (!student) throw notFound('profile')
  const clubs = await listClubs(db, studentId)
  return {
    birthDate: student.birth_date,
    handedness: student.handedness,
    handicap: student.handicap,
    limits: student.limits,
    goals: student.goals,
    practicePlaces: storedPlaces.parse(JSON.parse(student.practice_places)),
    sessionsPerWeek: student.sessions_per_week,
    minutesPerSession: student.minutes_per_session,
    clubs: clubs.map(({ club, length_m: lengthM, lie_deg: lieDeg, carry_m: carryM }) => ({ club, lengthM, lieDeg, carryM })),
  }
}
