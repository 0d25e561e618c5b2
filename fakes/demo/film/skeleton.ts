import type { Channel } from './swing-keys'
import type { Vec3 } from './vector'
import { add, along, cross, distance, mix, radians, scale, squareTo, subtract, turnAbout, unit, vec } from './vector'

export type Channels = Readonly<Record<Channel, number>>

/** Lengths of an invented grown-up of 1.80 m, in mm. */
export const BODY = {
  upperArm: 315, forearm: 275, thigh: 432, shank: 428,
  trunk: 570, halfShoulders: 182, shouldersBelowNeck: 42, halfHips: 92,
  ankleHeight: 82, heelBehindAnkle: 58, toeBeforeAnkle: 196,
  headAboveNeck: 164, headBeforeNeck: 42,
  leadWristOnShaft: 92, trailWristOnShaft: 168,
} as const

/** From the ball of the foot to its tip, and the middle of a shoe's sole over the ground. */
const TOES_MM = 62
const SOLE_MM = 22

/** A unit frame: across runs from the trail to the lead side, up along the part, front is where it faces. */
export interface Frame {
  across: Vec3
  up: Vec3
  front: Vec3
}

export interface Side {
  shoulder: Vec3
  elbow: Vec3
  wrist: Vec3
  hip: Vec3
  knee: Vec3
  ankle: Vec3
  heel: Vec3
  toe: Vec3
}

export interface Skeleton {
  pelvis: Vec3
  pelvisFrame: Frame
  neckBase: Vec3
  chestFrame: Frame
  head: Vec3
  headFrame: Frame
  lead: Side
  trail: Side
  gripEnd: Vec3
  clubHead: Vec3
  /** Along the shaft, from grip end to club head. */
  shaft: Vec3
  /** From heel to toe of the club head, square to the shaft. */
  clubToe: Vec3
  /** Where the face looks, square to both. */
  clubFace: Vec3
}

export interface Stance {
  leadAnkle: Vec3
  trailAnkle: Vec3
  leadFlareDeg: number
  trailFlareDeg: number
}

/** Where a pose puts every joint. @throws when a hand or foot cannot be reached: the keys are wrong then. */
export function skeletonAt(channels: Channels, stance: Stance, clubLengthMm: number): Skeleton {
  const pelvis = vec(channels.pelvisX, channels.pelvisY, channels.pelvisZ)
  const pelvisFrame = frameOf(vec(0, 1, 0), channels.pelvisTurn, channels.pelvisTilt)
  const spine = unit(vec(-Math.tan(radians(channels.side)), 1, Math.tan(radians(channels.bend))))
  const chestFrame = frameOf(spine, channels.chestTurn, 0)
  const neckBase = along(pelvis, spine, BODY.trunk)
  const shoulders = along(neckBase, spine, -BODY.shouldersBelowNeck)
  const leadShoulder = add(shoulders, add(scale(chestFrame.across, BODY.halfShoulders), scale(chestFrame.front, channels.leadForward)))
  const restTrail = add(shoulders, add(scale(chestFrame.across, -BODY.halfShoulders), scale(chestFrame.front, channels.trailForward)))
  const club = clubAt(channels, leadShoulder, clubLengthMm)
  // The trail palm lies behind the grip as seen from the target.
  const trailWrist = add(along(club.gripEnd, club.shaft, BODY.trailWristOnShaft), scale(club.clubFace, -14))
  const trailShoulder = within(restTrail, trailWrist, BODY.upperArm + BODY.forearm - 4)
  const legs = legsOf(channels, pelvis, pelvisFrame, stance)
  const { leadWrist, ...clubInHand } = club
  return {
    pelvis, pelvisFrame, neckBase, chestFrame, ...headAt(channels, neckBase, spine), ...clubInHand,
    lead: { ...legs.lead, shoulder: leadShoulder, wrist: leadWrist, elbow: elbowOf(leadShoulder, leadWrist, leadPole(chestFrame)) },
    trail: { ...legs.trail, shoulder: trailShoulder, wrist: trailWrist, elbow: elbowOf(trailShoulder, trailWrist, trailPole(chestFrame)) },
  }
}

/** A frame about `up`, turned open by `turnDeg`, its lead side raised by `tiltDeg`. */
function frameOf(up: Vec3, turnDeg: number, tiltDeg: number): Frame {
  const square = squareTo(vec(1, 0, 0), up)
  const across = turnAbout(square, up, turnDeg)
  const front = cross(across, up)
  return { across: turnAbout(across, front, tiltDeg), up: turnAbout(up, front, tiltDeg), front }
}

function inPlane(angleDeg: number, planeDeg: number): Vec3 {
  const [angle, plane] = [radians(angleDeg), radians(planeDeg)]
  return vec(Math.sin(angle), -Math.cos(angle) * Math.sin(plane), Math.cos(angle) * Math.cos(plane))
}

function clubAt(channels: Channels, leadShoulder: Vec3, clubLengthMm: number) {
  const leadWrist = along(leadShoulder, inPlane(channels.armAngle, channels.armPlane), channels.reach)
  const shaft = inPlane(channels.shaftAngle, channels.shaftPlane)
  const gripEnd = along(leadWrist, shaft, -BODY.leadWristOnShaft)
  const normal = vec(0, Math.cos(radians(channels.shaftPlane)), Math.sin(radians(channels.shaftPlane)))
  const clubToe = turnAbout(normal, shaft, channels.shaftRoll)
  return { leadWrist, shaft, gripEnd, clubHead: along(gripEnd, shaft, clubLengthMm), clubToe, clubFace: cross(clubToe, shaft) }
}

/** The shoulder girdle gives way when an arm is at full stretch. */
function within(from: Vec3, to: Vec3, mm: number): Vec3 {
  const far = distance(from, to)
  return far <= mm ? from : along(to, unit(subtract(from, to)), mm)
}

function leadPole(chest: Frame): Vec3 {
  return add(scale(chest.across, 0.5), add(scale(chest.up, -0.8), scale(chest.front, 0.1)))
}

function trailPole(chest: Frame): Vec3 {
  return add(scale(chest.across, -0.35), add(scale(chest.up, -1), scale(chest.front, -0.2)))
}

function elbowOf(shoulder: Vec3, wrist: Vec3, pole: Vec3): Vec3 {
  return jointBetween(shoulder, wrist, BODY.upperArm, BODY.forearm, pole)
}

/** The middle joint of two bones from `a` to `b` that bends toward `pole`. */
export function jointBetween(a: Vec3, b: Vec3, first: number, second: number, pole: Vec3): Vec3 {
  const span = distance(a, b)
  if (span > first + second) throw new Error(`A limb of ${first + second} mm cannot span ${span.toFixed(1)} mm.`)
  const axis = unit(subtract(b, a))
  const foot = (first ** 2 - second ** 2 + span ** 2) / (2 * span)
  const height = Math.sqrt(Math.max(0, first ** 2 - foot ** 2))
  return add(along(a, axis, foot), scale(squareTo(pole, axis), height))
}

function headAt(channels: Channels, neckBase: Vec3, spine: Vec3): { head: Vec3, headFrame: Frame } {
  const down = radians(channels.headDown)
  const level = turnAbout(vec(0, 0, 1), vec(0, 1, 0), channels.headTurn)
  const front = unit(add(scale(level, Math.cos(down)), vec(0, -Math.sin(down), 0)))
  const up = squareTo(mix(vec(0, 1, 0), spine, 0.25), front)
  const neck = unit(mix(spine, vec(0, 1, 0), 0.35))
  const head = add(along(neckBase, neck, BODY.headAboveNeck), scale(level, BODY.headBeforeNeck))
  return { head, headFrame: { across: cross(up, front), up, front } }
}

function legsOf(channels: Channels, pelvis: Vec3, frame: Frame, stance: Stance) {
  const leadHip = along(pelvis, frame.across, BODY.halfHips)
  const trailHip = along(pelvis, frame.across, -BODY.halfHips)
  const lead = footOf(stance.leadAnkle, stance.leadFlareDeg, 0, 0)
  const trail = footOf(stance.trailAnkle, -stance.trailFlareDeg, channels.trailFootTurn, channels.heelLift)
  const leadPoleDir = add(frame.front, add(lead.front, scale(vec(1, 0, 0), -0.12)))
  const trailPoleDir = add(scale(frame.front, 1.1), add(trail.front, vec(0.12, 0, 0)))
  return {
    lead: { hip: leadHip, knee: kneeOf(leadHip, lead.ankle, leadPoleDir), ankle: lead.ankle, heel: lead.heel, toe: lead.toe },
    trail: { hip: trailHip, knee: kneeOf(trailHip, trail.ankle, trailPoleDir), ankle: trail.ankle, heel: trail.heel, toe: trail.toe },
  }
}

function kneeOf(hip: Vec3, ankle: Vec3, pole: Vec3): Vec3 {
  return jointBetween(hip, ankle, BODY.thigh, BODY.shank, pole)
}

/** A foot that turns and rises about the ball of the foot, which stays where it stood at address. */
function footOf(restAnkle: Vec3, flareDeg: number, turnDeg: number, liftDeg: number): { ankle: Vec3, heel: Vec3, toe: Vec3, front: Vec3 } {
  const up = vec(0, 1, 0)
  const ballOfFoot = BODY.toeBeforeAnkle - TOES_MM
  const pivot = along(vec(restAnkle.x, 0, restAnkle.z), turnAbout(vec(0, 0, 1), up, flareDeg), ballOfFoot)
  const front = turnAbout(vec(0, 0, 1), up, flareDeg + turnDeg)
  const sideways = cross(up, front)
  const place = (forwardMm: number, upMm: number): Vec3 =>
    add(pivot, turnAbout(add(scale(front, forwardMm - ballOfFoot), vec(0, upMm, 0)), sideways, liftDeg))
  // Toes bend at the ball of the foot: they stay near the ground while the heel rises.
  const toe = along(pivot, front, TOES_MM - 0.15 * liftDeg)
  return { ankle: place(0, BODY.ankleHeight), heel: place(-BODY.heelBehindAnkle, SOLE_MM), toe: vec(toe.x, SOLE_MM, toe.z), front }
}
