/** Names of the positions, in their order, as measuring defines them. */
export const POSITIONS = [
  'address',
  'shaft_level_back',
  'arm_level_back',
  'top',
  'arm_level_down',
  'shaft_level_down',
  'impact',
  'shaft_level_through',
  'arm_level_through',
  'finish',
] as const

export type Position = typeof POSITIONS[number]

export type Release = 'sound' | 'early'
export type Hands = 'right' | 'left'
export type Contact = 'solid' | 'fat' | 'thin'
export type ClubKind = '7-iron' | 'driver'

export interface SwingKind {
  release: Release
  contact: Contact
  club: ClubKind
  hands: Hands
}

export interface ClubMeasures {
  /** Grip end to where the axis of the shaft meets the ground, in mm. */
  lengthMm: number
  /** Axis of the shaft behind the back of the ball when the face reaches it, in mm along the target line. */
  behindBallMm: number
  /** Axis of the shaft nearer to the golfer than the middle of the ball, in mm. */
  insideBallMm: number
  /** Height of the lowest point of the ball over the ground, in mm. */
  teeMm: number
  /** What the ball does, as common practice has it. */
  launchDeg: number
  ballMps: number
}

/** 37 and 44 inches; the rest is what the heads are drawn with. */
export const CLUBS: Readonly<Record<ClubKind, ClubMeasures>> = {
  '7-iron': { lengthMm: 940, behindBallMm: 12, insideBallMm: 38, teeMm: 0, launchDeg: 18, ballMps: 46 },
  'driver': { lengthMm: 1118, behindBallMm: 22, insideBallMm: 52, teeMm: 32, launchDeg: 13, ballMps: 62 },
}

/** Rules of golf: a ball is at least 42.67 mm across. */
export const BALL_RADIUS_MM = 21.335

/** Height of the sole over the ground when the face reaches the ball, in mm: what makes a strike fat or thin. */
export const SOLE_AT_BALL_MM: Readonly<Record<Contact, number>> = { solid: 1, fat: -11, thin: 17 }
