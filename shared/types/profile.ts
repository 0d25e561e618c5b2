import type { Handedness } from '#shared/domain/clubs/handedness'
import type { PracticePlace } from '#shared/domain/people/practice-places'

/** A student's own club. Null for length or lie: the default of that club. */
export interface ProfileClub {
  /** A key of `shared/domain/review/clubs`, or the student's own word. */
  club: string
  lengthM: number | null
  lieDeg: number | null
  carryM: number | null
}

/** `GET, PUT /api/profile`: what a student says once and every coach reads. */
export interface ProfileView {
  /** Calendar day; not changed here. */
  birthDate: string
  handedness: Handedness
  /** As entered: an index, a usual score, "beginner". */
  handicap: string
  /** What hurts or does not move. */
  limits: string
  goals: string
  practicePlaces: PracticePlace[]
  sessionsPerWeek: number | null
  minutesPerSession: number | null
  /** In the order the student gave them. */
  clubs: ProfileClub[]
}
