import { CLUBS } from '#shared/domain/review/clubs'
import type { Club } from '#shared/domain/review/clubs'

/** Exact by definition. */
export const INCH_M = 0.0254

export interface ClubBuild {
  /** Grip end to sole. */
  lengthM: number
  /** Between shaft and ground when the sole lies flat. */
  lieDeg: number
}

/** Inches and degrees, as the trade quotes them. */
const BUILDS: Readonly<Record<Club, readonly [lengthIn: number, lieDeg: number]>> = {
  'driver': [45, 58],
  '3-wood': [43, 57],
  '5-wood': [42, 58],
  'hybrid': [40, 59],
  '3-iron': [39, 60],
  '4-iron': [38.5, 60.5],
  '5-iron': [38, 61],
  '6-iron': [37.5, 61.5],
  '7-iron': [37, 62],
  '8-iron': [36.5, 62.5],
  '9-iron': [36, 63],
  'pitching-wedge': [35.5, 63.5],
  'gap-wedge': [35.5, 63.5],
  'sand-wedge': [35.25, 64],
  'lob-wedge': [35, 64],
  'putter': [34, 71],
}

/**
 * Length and lie of a club nobody has measured: common practice, no published source. A student's own figures replace them.
 *
 * @returns lengths of 0.86 to 1.15 m, lies of 57 to 71 degrees
 */
export function defaultClubBuild(club: Club): ClubBuild {
  const [lengthIn, lieDeg] = BUILDS[club]
  return { lengthM: lengthIn * INCH_M, lieDeg }
}

/** As `defaultClubBuild`, of a key stored with a review; undefined for a club that the list lacks. */
export function findDefaultClubBuild(key: string): ClubBuild | undefined {
  const club = CLUBS.find(known => known === key)
  return club && defaultClubBuild(club)
}

/**
 * How far a default may be from the club in the picture, as standard uncertainties. Our choice, no published source:
 * clubs are cut in half inches and bent in whole degrees, and a default is seldom more than twice that off.
 */
export const DEFAULT_BUILD_UNCERTAINTY: Readonly<ClubBuild> = { lengthM: 0.5 * INCH_M, lieDeg: 1 }
