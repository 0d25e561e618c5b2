import { describe, expect, it } from 'vitest'
import { apparentClubLengthM } from '#shared/domain/clubs/apparent-length'
import { defaultClubBuild, findDefaultClubBuild, INCH_M } from '#shared/domain/clubs/defaults'
import { HANDEDNESSES, leadSide, targetSignFaceOn, trailSide } from '#shared/domain/clubs/handedness'
import {
  CLUB_LENGTH_PROBLEM_WORDS,
  CLUB_LIE_PROBLEM_WORDS,
  clubLengthProblem,
  clubLieProblem,
} from '#shared/domain/clubs/limits'
import { CLUBS } from '#shared/domain/review/clubs'

describe('default lengths and lies', () => {
  it('has one for every club, each within the rules', () => {
    for (const club of CLUBS) {
      const build = defaultClubBuild(club)
      expect(clubLengthProblem(club, build.lengthM), club).toBeUndefined()
      expect(clubLieProblem(build.lieDeg), club).toBeUndefined()
    }
  })

  it('never makes a shorter club longer, and stands shorter irons more upright', () => {
    const builds = CLUBS.map(defaultClubBuild)
    builds.slice(1).forEach((build, index) => expect(build.lengthM).toBeLessThanOrEqual(builds[index]?.lengthM ?? 0))
    const irons = CLUBS.filter(club => club.endsWith('-iron')).map(defaultClubBuild)
    irons.slice(1).forEach((build, index) => expect(build.lieDeg).toBeGreaterThan(irons[index]?.lieDeg ?? 90))
  })

  it('gives a 7-iron 37 inches in metres', () => {
    // Common practice, no published source; 37 × 0.0254.
    expect(defaultClubBuild('7-iron').lengthM).toBeCloseTo(0.9398, 10)
  })

  it('knows nothing of a club outside the list', () => {
    expect(findDefaultClubBuild('one-off chipper')).toBeUndefined()
    expect(findDefaultClubBuild('driver')).toEqual(defaultClubBuild('driver'))
  })
})

describe('limits, Equipment Rules 2.1c', () => {
  it.each([
    // At least 18 in (0.457 m); except putters at most 48 in (1.219 m).
    ['7-iron', 18 * INCH_M, undefined],
    ['7-iron', 0.457, undefined],
    ['7-iron', 17.9 * INCH_M, 'too-short'],
    ['putter', 17.9 * INCH_M, 'too-short'],
    ['driver', 48 * INCH_M, undefined],
    ['driver', 1.219, undefined],
    ['driver', 48.01 * INCH_M, 'too-long'],
    ['putter', 52 * INCH_M, undefined],
    ['one-off chipper', 49 * INCH_M, 'too-long'],
    ['driver', 0, 'not-a-length'],
    ['driver', -1, 'not-a-length'],
    ['driver', Number.NaN, 'not-a-length'],
    ['putter', Number.POSITIVE_INFINITY, 'not-a-length'],
  ] as const)('%s of %d m: %s', (club, lengthM, problem) => {
    expect(clubLengthProblem(club, lengthM)).toBe(problem)
  })

  it.each([[45, undefined], [80, undefined], [44.9, 'too-flat'], [80.1, 'too-upright'], [Number.NaN, 'not-an-angle']] as const)('a lie of %d: %s', (lieDeg, problem) => {
    expect(clubLieProblem(lieDeg)).toBe(problem)
  })

  it('says in inches and centimetres what is allowed', () => {
    expect(CLUB_LENGTH_PROBLEM_WORDS['too-long']).toContain('48 inches (121.9 cm)')
    expect(CLUB_LENGTH_PROBLEM_WORDS['too-short']).toContain('18 inches (45.7 cm)')
    expect(CLUB_LIE_PROBLEM_WORDS['too-flat']).toContain('45 degrees')
  })
})

describe('apparent length at address', () => {
  it('is L · sin(lie) face-on and L down the line', () => {
    // sin 30° = 1/2.
    expect(apparentClubLengthM('face_on', { lengthM: 1, lieDeg: 30 })).toBeCloseTo(0.5, 12)
    expect(apparentClubLengthM('down_the_line', { lengthM: 1, lieDeg: 30 })).toBe(1)
    expect(apparentClubLengthM('face_on', { lengthM: 0.94, lieDeg: 90 })).toBeCloseTo(0.94, 12)
  })
})

describe('handedness', () => {
  it('puts the lead side nearer to the target', () => {
    expect(leadSide('right')).toBe('left')
    expect(leadSide('left')).toBe('right')
    for (const handedness of HANDEDNESSES) expect(trailSide(handedness)).not.toBe(leadSide(handedness))
  })

  it('has the target on the right of a face-on picture for a right-hander', () => {
    expect(targetSignFaceOn('right')).toBe(1)
    expect(targetSignFaceOn('left')).toBe(-1)
  })
})
