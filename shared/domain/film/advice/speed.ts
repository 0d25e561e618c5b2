import { defaultClubBuild, INCH_M } from '#shared/domain/clubs/defaults'
import { CLUBS } from '#shared/domain/review/clubs'
import type { Club } from '#shared/domain/review/clubs'

/** Both exact by definition. */
export const YARD_M = 0.9144
export const MILE_PER_HOUR_MPS = 0.44704

export interface HeadSpeed {
  speedMps: number
  /** `carry`: from the student's own; `usual`: what a club golfer does with this club. */
  basis: 'carry' | 'usual'
}

/** Two clubs whose figures the trade quotes; common practice, no published source. */
const SEVEN_IRON = { yardsPerMph: 1.85, usualMph: 76 }
const DRIVER = { yardsPerMph: 2.35, usualMph: 90 }

/** A putt of a few steps; common practice, no published source. */
const PUTTER_USUAL_MPH = 4

/** Outside this a carry is a part shot or a slip of the keyboard, and the rule, which is for full swings, says nothing. */
const BELIEVED_MPH = { min: 20, max: 150 }

/**
 * Club-head speed at the ball, for advice alone: never shown as a measure.
 *
 * From the usual carry: 7-iron mph = yards / 1.85, driver mph = yards / 2.35. Every other club lies on the straight line
 * through these two over the clubs' default lengths, which goes on below the 7-iron. Without a carry that can be
 * believed: 76 mph for a 7-iron, 90 for a driver, and the same line; a putter 4 mph, whatever its carry.
 * All common practice with no published source.
 *
 * @param key key of a club
 * @param usualCarryM of a full swing, in metres
 * @returns undefined for a club that the list lacks
 */
export function estimateHeadSpeed(key: string, usualCarryM?: number): HeadSpeed | undefined {
  const club = CLUBS.find(known => known === key)
  if (club === undefined)
    return undefined
  if (club === 'putter')
    return { speedMps: PUTTER_USUAL_MPH * MILE_PER_HOUR_MPS, basis: 'usual' }
  const carriedMph = (usualCarryM ?? Number.NaN) / YARD_M / alongLengths(club, SEVEN_IRON.yardsPerMph, DRIVER.yardsPerMph)
  // A carry that is not a number fails both comparisons.
  if (carriedMph >= BELIEVED_MPH.min && carriedMph <= BELIEVED_MPH.max)
    return { speedMps: carriedMph * MILE_PER_HOUR_MPS, basis: 'carry' }
  return { speedMps: alongLengths(club, SEVEN_IRON.usualMph, DRIVER.usualMph) * MILE_PER_HOUR_MPS, basis: 'usual' }
}

function alongLengths(club: Club, atSevenIron: number, atDriver: number): number {
  const lengthIn = (of: Club): number => defaultClubBuild(of).lengthM / INCH_M
  const share = (lengthIn(club) - lengthIn('7-iron')) / (lengthIn('driver') - lengthIn('7-iron'))
  return atSevenIron + share * (atDriver - atSevenIron)
}
