import { INCH_M } from './defaults'

/**
 * Equipment Rules (R&A and USGA) 2.1c: at least 18 in, and except putters at most 48 in. Inches take precedence over the
 * metres printed beside them; the shorter metric print (0.457 m, 0.2 mm under 18 in) is taken too, so that nobody who
 * copies the rule is told off.
 */
export const CLUB_MIN_LENGTH_M = 0.457
export const CLUB_MAX_LENGTH_M = 48 * INCH_M

/** Wider than any club is built, to catch a slip of the keyboard. Our choice, no published source. */
export const CLUB_MIN_LIE_DEG = 45
export const CLUB_MAX_LIE_DEG = 80

/** Inches turned into metres and back may end a hair over the limit. */
const ROUNDING_M = 1e-9

export type ClubLengthProblem = 'not-a-length' | 'too-short' | 'too-long'
export type ClubLieProblem = 'not-an-angle' | 'too-flat' | 'too-upright'

/**
 * What is wrong with a club's length, by Equipment Rules 2.1c.
 *
 * @param club key of a club; a key that the list lacks is held to both limits
 * @returns undefined for a length that the rules allow, the limits themselves included
 */
export function clubLengthProblem(club: string, lengthM: number): ClubLengthProblem | undefined {
  if (!Number.isFinite(lengthM) || lengthM <= 0)
    return 'not-a-length'
  if (lengthM < CLUB_MIN_LENGTH_M - ROUNDING_M)
    return 'too-short'
  if (club !== 'putter' && lengthM > CLUB_MAX_LENGTH_M + ROUNDING_M)
    return 'too-long'
  return undefined
}

/** What is wrong with a club's lie; undefined for 45 to 80 degrees. */
export function clubLieProblem(lieDeg: number): ClubLieProblem | undefined {
  if (!Number.isFinite(lieDeg))
    return 'not-an-angle'
  if (lieDeg < CLUB_MIN_LIE_DEG)
    return 'too-flat'
  return lieDeg > CLUB_MAX_LIE_DEG ? 'too-upright' : undefined
}

/** Fit to stand beside the field. */
export const CLUB_LENGTH_PROBLEM_WORDS: Readonly<Record<ClubLengthProblem, string>> = {
  'not-a-length': 'Give the length from the grip end to the sole, in inches or centimetres.',
  'too-short': 'A club is at least 18 inches (45.7 cm) long. Check the number and the unit.',
  'too-long': 'A club other than a putter is at most 48 inches (121.9 cm) long. Check the number and the unit.',
}

/** Fit to stand beside the field. */
export const CLUB_LIE_PROBLEM_WORDS: Readonly<Record<ClubLieProblem, string>> = {
  'not-an-angle': 'Give the lie in degrees, the angle between shaft and ground.',
  'too-flat': 'A lie is at least 45 degrees. Check the number, or leave it to the default.',
  'too-upright': 'A lie is at most 80 degrees. Check the number, or leave it to the default.',
}
