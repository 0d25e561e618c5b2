import { recordOf } from './record-of'
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

/** One value for each of the ten positions; before the last, one for the arms wrapping round. */
type Row = readonly [number, number, number, number, number, number, number, number, number, number, number]
type Table = Readonly<Record<Channel, Row>>

/** Seconds from impact at which the pose of each position is (nearly) reached: 0.80 s back, 0.27 s down. */
const SOUND_TIMES: Row = [-1.07, -0.71, -0.55, -0.27, -0.132, -0.05, 0, 0.06, 0.122, 0.26, 0.64]
const EARLY_TIMES: Row = [-1.07, -0.71, -0.55, -0.27, -0.128, -0.062, 0, 0.062, 0.13, 0.28, 0.68]

const SOUND: Table = {
  pelvisX: [-62, -60, -58, -52, -8, 30, 52, 70, 88, 106, 122],
  pelvisY: [884, 882, 880, 877, 866, 872, 882, 893, 900, 904, 906],
  pelvisZ: [-900, -902, -903, -905, -907, -904, -896, -886, -868, -834, -800],
  pelvisTurn: [0, -16, -32, -46, -16, 14, 36, 52, 66, 80, 96],
  pelvisTilt: [1, -3, -6, -8, -1, 5, 8, 9, 8, 6, 2],
  bend: [33, 33, 33, 33, 35, 36, 35, 31, 25, 13, 3],
  side: [6, 5, 4, 3, 9, 14, 17, 19, 18, 13, 5],
  chestTurn: [0, -42, -70, -92, -48, -8, 22, 50, 76, 98, 112],
  leadForward: [45, 55, 65, 75, 68, 62, 52, 30, 12, 4, 0],
  trailForward: [45, 30, 10, -10, 0, 30, 50, 60, 70, 70, 60],
  armAngle: [-3, -45, -90, -158, -90, -26, -3, 30, 68, 114, 152],
  armPlane: [76, 71, 61, 50, 56, 70, 76, 74, 67, 63, 62],
  reach: [588, 588, 588, 587, 588, 588, 588, 587, 566, 450, 340],
  shaftAngle: [-6, -90, -187, -264, -190, -90, -7, 90, 172, 242, 296],
  shaftPlane: [62, 60, 58, 55, 54, 58, 63, 62, 60, 56, 52],
  shaftRoll: [0, 62, 80, 88, 84, 62, 0, -62, -80, -86, -88],
  headTurn: [0, -4, -8, -12, -8, -5, -2, 6, 24, 52, 84],
  headDown: [30, 30, 30, 30, 31, 32, 32, 31, 24, 14, 2],
  heelLift: [0, 0, 0, 0, 4, 12, 22, 32, 44, 62, 78],
  trailFootTurn: [0, 0, 0, 0, 0, 2, 6, 14, 26, 46, 62],
}

/** The wrists let go early and the hands slow: the same body, later hips, the club ahead of the arms. */
const EARLY: Table = {
  ...SOUND,
  pelvisX: [-62, -60, -60, -58, -34, -6, 22, 42, 62, 86, 112],
  pelvisTurn: [0, -16, -32, -46, -24, 0, 20, 40, 58, 76, 92],
  side: [6, 5, 4, 3, 8, 12, 15, 17, 17, 13, 5],
  chestTurn: [0, -42, -70, -92, -54, -18, 10, 40, 70, 94, 110],
  armAngle: [-3, -45, -90, -158, -90, -42, -12, 20, 62, 108, 150],
  shaftAngle: [-6, -90, -187, -257, -168, -90, 1, 90, 168, 238, 292],
  heelLift: [0, 0, 0, 0, 2, 6, 12, 24, 38, 58, 76],
}

/** Rates near impact, in degrees a second, at arm level down, shaft level down, impact and shaft level through. */
interface Rates {
  arm: readonly [number, number, number, number]
  shaft: readonly [number, number, number, number]
}

const RATES: Readonly<Record<Release, Rates>> = {
  sound: { arm: [800, 590, 440, 600], shaft: [960, 1450, 1960, 1450] },
  early: { arm: [760, 600, 400, 600], shaft: [1000, 1330, 1600, 1270] },
}

/** A driver is swung round a flatter plane from a wider stance, and meets the ball on the way up. */
const DRIVER: Partial<Record<Channel, Row>> = {
  pelvisX: [-136, -134, -132, -124, -76, -36, -14, 6, 22, 36, 46],
  pelvisY: [878, 877, 875, 872, 863, 870, 882, 892, 893, 888, 882],
  pelvisZ: [-1168, -1170, -1171, -1173, -1175, -1172, -1164, -1154, -1136, -1102, -1068],
  side: [9, 8, 7, 5, 12, 18, 21, 23, 21, 15, 6],
  bend: [27, 27, 27, 27, 29, 30, 29, 25, 19, 10, 3],
  shaftAngle: [0, -90, -187, -266, -190, -90, -2, 90, 172, 242, 298],
  shaftPlane: [53, 52, 51, 49, 48, 51, 54, 54, 53, 52, 50],
  armPlane: [67, 64, 56, 47, 52, 63, 67, 66, 62, 60, 60],
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
  return { ...recordOf(CHANNELS, channel => knots(channel)), armAngle: knots('armAngle', arm), shaftAngle: knots('shaftAngle', shaft) }
}

/** When each position's pose is meant, in seconds from impact. Positions themselves are found on the moving model. */
export function positionTimes(release: Release): Row {
  return release === 'early' ? EARLY_TIMES : SOUND_TIMES
}
