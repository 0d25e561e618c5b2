import { z } from 'zod'
import { HANDEDNESSES } from '#shared/domain/clubs/handedness'
import { CLUB_LENGTH_PROBLEM_WORDS, CLUB_LIE_PROBLEM_WORDS, clubLengthProblem, clubLieProblem } from '#shared/domain/clubs/limits'
import { PRACTICE_PLACES } from '#shared/domain/people/practice-places'
import { requiredText, text } from './common'
import { SHORT_TEXT_MAX_LENGTH } from './reviews'

/** The bag holds fourteen (Rules of Golf 4.1b); people own some more. */
export const PROFILE_CLUB_MAX_COUNT = 30

/** Farther than anybody hits a ball in play; catches a slip of the keyboard. */
export const CARRY_MAX_M = 450

export const carrySchema = z.number('Give the carry as a number.')
  .min(0, 'A carry is not negative.')
  .max(CARRY_MAX_M, `A carry is at most ${CARRY_MAX_M} m (490 yards). Check the number and the unit.`)

/** Null for length or lie: the default of that club. */
export const profileClubSchema = z.object({
  club: requiredText(40, 'Say which club.').transform(key => key.trim()),
  lengthM: z.number(CLUB_LENGTH_PROBLEM_WORDS['not-a-length']).nullable(),
  lieDeg: z.number(CLUB_LIE_PROBLEM_WORDS['not-an-angle']).nullable(),
  carryM: carrySchema.nullable(),
}).superRefine(({ club, lengthM, lieDeg }, context) => {
  const lengthProblem = lengthM === null ? undefined : clubLengthProblem(club, lengthM)
  if (lengthProblem) context.addIssue({ code: 'custom', path: ['lengthM'], message: CLUB_LENGTH_PROBLEM_WORDS[lengthProblem] })
  const lieProblem = lieDeg === null ? undefined : clubLieProblem(lieDeg)
  if (lieProblem) context.addIssue({ code: 'custom', path: ['lieDeg'], message: CLUB_LIE_PROBLEM_WORDS[lieProblem] })
})

/** `PUT /api/profile`: all of it; the date of birth decides who must consent and is not changed here. */
export const profileSchema = z.object({
  handedness: z.enum(HANDEDNESSES),
  /** As the student says it: an index, a usual score, "beginner". */
  handicap: text(80),
  limits: text(SHORT_TEXT_MAX_LENGTH),
  goals: text(SHORT_TEXT_MAX_LENGTH),
  practicePlaces: z.array(z.enum(PRACTICE_PLACES)).refine(isDistinct, 'Name each place once.'),
  sessionsPerWeek: z.number('Give a number.').int('Give a whole number.').min(0, 'Not below 0.').max(21, 'At most 21, three a day.').nullable(),
  minutesPerSession: z.number('Give a number.').int('Give a whole number of minutes.').min(1, 'At least a minute.').max(480, 'At most 480 minutes.').nullable(),
  clubs: z.array(profileClubSchema).max(PROFILE_CLUB_MAX_COUNT, `At most ${PROFILE_CLUB_MAX_COUNT} clubs.`)
    .refine(clubs => isDistinct(clubs.map(({ club }) => club.toLowerCase())), 'Name each club once.'),
})
export type ProfileInput = z.infer<typeof profileSchema>

function isDistinct(values: readonly string[]): boolean {
  return new Set(values).size === values.length
}
