import type { Knot } from './spline'
import type { ClubKind, Release } from './swing-kinds'

/**
 * What a pose is made of. Angles in degrees, lengths in mm, written for a golfer whose target lies toward +x.
 * Turns are + when open to the target. Arm and shaft angles are those of a double pendulum: from straight down, + toward
 * the target, each in a plane through the target line that rises from the ground by its own tilt.
 */
export const CHANNELS = [
  'pelvisX', 'pelvisY', 'pelvisZ', 'pelvisTurn', 'pelvisTilt',
  'bend', 'side', 'chestTurn', 'leadForward', 'trailForward',
  'armAngle', 'armPlane', 'reach', 'shaftAngle', 'shaftPlane', 'shaftRoll',
  'headTurn', 'headDown', 'heelLift', 'trailFootTurn',
] as const

export type Channel = typeof CHANNELS[number]

/** One value for each of the ten positions. */
type Row = readonly [number, number, number, number, number, number, number, number, number, number]
type Table = Readonly<Record<Channel, Row>>

/** Seconds from impact at which the pose of each position is (nearly) reached: 0.80 s back, 0.27 s down. */
const SOUND_TIMES: Row = [-1.07, -0.71, -0.55, -0.27, -0.135, -0.055, 0, 0.056, 0.118, 0.62]
const EARLY_TIMES: Row = [-1.07, -0.71, -0.55, -0.27, -0.13, -0.065, 0, 0.062, 0.13, 0.66]

const SOUND: Table = {
  pelvisX: [-62, -60, -58, -52, -8, 30, 58, 74, 90, 132],
  pelvisY: [905, 903, 902, 899, 886, 892, 905, 916, 926, 944],
  pelvisZ: [-900, -902, -903, -905, -907, -906, -902, -896, -888, -850],
  pelvisTurn: [0, -16, -32, -46, -16, 14, 36, 52, 66, 96],
  pelvisTilt: [1, -3, -6, -8, -1, 5, 8, 9, 8, 2],
  bend: [36, 36, 36, 35, 37, 37, 34, 30, 25, 3],
  side: [6, 5, 4, 3, 9, 14, 17, 19, 18, 5],
  chestTurn: [0, -42, -70, -92, -48, -8, 24, 50, 76, 112],
  leadForward: [45, 55, 65, 75, 65, 55, 40, 20, 10, 0],
  trailForward: [45, 30, 10, -10, 0, 30, 50, 60, 70, 60],
  armAngle: [-3, -45, -90, -158, -90, -28, -3, 30, 76, 152],
  armPlane: [80, 74, 62, 50, 56, 72, 80, 76, 68, 62],
  reach: [586, 586, 584, 578, 584, 586, 587, 584, 560, 340],
  shaftAngle: [0, -90, -187, -264, -178, -90, -7, 90, 172, 296],
  shaftPlane: [62, 60, 58, 55, 54, 58, 64, 62, 60, 52],
  shaftRoll: [0, 62, 80, 88, 84, 62, 0, -62, -80, -88],
  headTurn: [0, -4, -8, -12, -8, -5, -2, 6, 24, 84],
  headDown: [52, 52, 52, 51, 53, 54, 54, 52, 42, 4],
  heelLift: [0, 0, 0, 0, 4, 12, 22, 32, 44, 78],
  trailFootTurn: [0, 0, 0, 0, 0, 2, 6, 14, 26, 62],
}

/** The wrists let go early and the hands slow: the same body, later hips, the club ahead of the arms. */
const EARLY: Table = {
  ...SOUND,
  pelvisX: [-62, -60, -60, -58, -34, -6, 16, 34, 56, 112],
  pelvisTurn: [0, -16, -32, -46, -24, 0, 20, 40, 58, 92],
  side: [6, 5, 4, 3, 8, 12, 15, 17, 17, 5],
  chestTurn: [0, -42, -70, -92, -54, -18, 10, 40, 70, 110],
  armAngle: [-3, -45, -90, -158, -90, -42, -9, 24, 70, 150],
  shaftAngle: [0, -90, -187, -258, -160, -90, 3, 90, 168, 292],
  heelLift: [0, 0, 0, 0, 2, 6, 12, 24, 38, 76],
}

/** Rates near impact, in degrees a second, at arm level down, shaft level down, impact and shaft level through. */
interface Rates {
  arm: readonly [number, number, number, number]
  shaft: readonly [number, number, number, number]
}

const RATES: Readonly<Record<Release, Rates>> = {
  sound: { arm: [790, 640, 470, 600], shaft: [780, 1480, 1800, 1520] },
  early: { arm: [730, 590, 440, 560], shaft: [930, 1290, 1560, 1380] },
}

/** A driver is swung round a flatter plane from a wider stance, and meets the ball on the way up. */
const DRIVER: Partial<Record<Channel, Row>> = {
  pelvisX: [-95, -94, -92, -86, -48, -14, 10, 30, 60, 120],
  side: [10, 9, 8, 6, 13, 19, 23, 25, 23, 6],
  bend: [33, 33, 33, 32, 34, 34, 31, 27, 23, 3],
  shaftAngle: [0, -90, -187, -268, -178, -90, -1, 90, 172, 298],
  shaftPlane: [57, 55, 54, 51, 50, 54, 59, 58, 56, 50],
  armPlane: [77, 71, 59, 48, 54, 69, 77, 73, 66, 60],
}

const DOWN_FROM = 4

/** Knots of every channel for a swing whose impact is at 0 s. */
export function swingKnots(release: Release, club: ClubKind): Record<Channel, Knot[]> {
  const table = { ...(release === 'early' ? EARLY : SOUND), ...(club === 'driver' ? DRIVER : {}) }
  const times = positionTimes(release)
  const knots = (channel: Channel, rates?: Rates['arm']): Knot[] => table[channel].map((value, index) => ({
    t: times[index] ?? 0, value, rate: rates?.[index - DOWN_FROM],
  }))
  const { arm, shaft } = RATES[release]
  return {
    pelvisX: knots('pelvisX'), pelvisY: knots('pelvisY'), pelvisZ: knots('pelvisZ'),
    pelvisTurn: knots('pelvisTurn'), pelvisTilt: knots('pelvisTilt'),
    bend: knots('bend'), side: knots('side'), chestTurn: knots('chestTurn'),
    leadForward: knots('leadForward'), trailForward: knots('trailForward'),
    armAngle: knots('armAngle', arm), armPlane: knots('armPlane'), reach: knots('reach'),
    shaftAngle: knots('shaftAngle', shaft), shaftPlane: knots('shaftPlane'), shaftRoll: knots('shaftRoll'),
    headTurn: knots('headTurn'), headDown: knots('headDown'),
    heelLift: knots('heelLift'), trailFootTurn: knots('trailFootTurn'),
  }
}

/** When each position's pose is meant, in seconds from impact. Positions themselves are found on the moving model. */
export function positionTimes(release: Release): Row {
  return release === 'early' ? EARLY_TIMES : SOUND_TIMES
}
