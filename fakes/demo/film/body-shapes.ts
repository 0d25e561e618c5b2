import type { Frame, Side, Skeleton } from './skeleton'
import type { Mark } from './marks'
import type { Vec3 } from './vector'
import { add, along, mix, scale, squareTo, unit, vec } from './vector'

export type Material = 'shirt' | 'sleeve' | 'skin' | 'glove' | 'trousers' | 'belt' | 'shoe' | 'cap' | 'hair' | 'grip' | 'shaft' | 'head'

/** Two balls and what lies between them: a limb. */
export interface Capsule {
  kind: 'capsule'
  from: Vec3
  to: Vec3
  fromMm: number
  toMm: number
  /** Marks at its two ends. */
  marks?: { from?: Mark, to?: Mark }
}

/** The least convex body around points: a trunk, a cap. */
export interface Hull {
  kind: 'hull'
  points: Vec3[]
}

export type Shape = Capsule | Hull

export interface Part {
  /** Parts of one owner do not hide each other's marks. */
  owner: string
  material: Material
  shapes: Shape[]
  /** What decides which part is nearer. */
  centre: Vec3
  /** Drawn as if nearer by so much. */
  nearerMm: number
}

/** Two balls that make the seat; the rear of the seat is the rearmost point of the rearmost one. */
export const SEAT = { backMm: 36, downMm: 26, radiusMm: 97 } as const

const RING_POINTS = 28

/** The golfer as bodies that a camera can see and that hide what is behind them. */
export function bodyParts(body: Skeleton): Part[] {
  return [...trunkParts(body), ...legParts('lead', body.lead), ...legParts('trail', body.trail), ...armParts('lead', body.lead, body), ...armParts('trail', body.trail, body), ...headParts(body)]
}

export function seatBalls(body: Skeleton): Vec3[] {
  return [body.lead.hip, body.trail.hip].map(hip => add(along(hip, body.pelvisFrame.front, -SEAT.backMm), vec(0, -SEAT.downMm, 0)))
}

function part(owner: string, material: Material, centre: Vec3, shapes: Shape[], nearerMm = 0): Part {
  return { owner, material, centre, shapes, nearerMm }
}

function capsule(from: Vec3, to: Vec3, fromMm: number, toMm: number, marks?: Capsule['marks']): Capsule {
  return { kind: 'capsule', from, to, fromMm, toMm, marks }
}

/** An ellipse across the body: half as wide and half as deep as given. */
export function ring(centre: Vec3, frame: Frame, wideMm: number, deepMm: number): Vec3[] {
  return Array.from({ length: RING_POINTS }, (_, index) => {
    const angle = index * 2 * Math.PI / RING_POINTS
    return add(centre, add(scale(frame.across, Math.cos(angle) * wideMm), scale(frame.front, Math.sin(angle) * deepMm)))
  })
}

/** A place on the trunk's axis and how the trunk is turned there; 0 at the hips, 1 at the neck. */
export function trunkAt(body: Skeleton, share: number): { centre: Vec3, frame: Frame } {
  const up = mix(body.pelvisFrame.up, body.chestFrame.up, share)
  const frameUp = unit(up)
  const across = squareTo(mix(body.pelvisFrame.across, body.chestFrame.across, share), frameUp)
  // The small of the back lies behind the straight line from hips to neck.
  const hollow = -26 * Math.sin(Math.PI * share)
  const front = squareTo(squareTo(mix(body.pelvisFrame.front, body.chestFrame.front, share), frameUp), across)
  return { centre: along(mix(body.pelvis, body.neckBase, share), front, hollow), frame: { across, up: frameUp, front } }
}

function ringAt(body: Skeleton, share: number, wideMm: number, deepMm: number): Vec3[] {
  const { centre, frame } = trunkAt(body, share)
  return ring(centre, frame, wideMm, deepMm)
}

export const BELT = { share: 0.1, wideMm: 158, deepMm: 112 } as const

function trunkParts(body: Skeleton): Part[] {
  const chest = ringAt(body, 0.7, 170, 118)
  const yoke = [capsule(body.lead.shoulder, mix(body.lead.shoulder, body.neckBase, 0.6), 56, 60), capsule(body.trail.shoulder, mix(body.trail.shoulder, body.neckBase, 0.6), 56, 60)]
  const shoulders: Hull = { kind: 'hull', points: [...chest, ...ringAt(body, 0.97, 84, 62), ...ringAt(body, 0.86, 178, 94)] }
  const waist: Hull = { kind: 'hull', points: [...chest, ...ringAt(body, 0.36, 150, 108), ...ringAt(body, BELT.share, BELT.wideMm, BELT.deepMm)] }
  const belt: Hull = { kind: 'hull', points: [...ringAt(body, BELT.share, BELT.wideMm + 2, BELT.deepMm + 2), ...ringAt(body, BELT.share - 0.07, BELT.wideMm + 3, BELT.deepMm + 3)] }
  const pelvis: Hull = { kind: 'hull', points: [...ringAt(body, BELT.share - 0.06, BELT.wideMm + 1, BELT.deepMm + 1), ...ringAt(body, -0.1, 150, 86)] }
  const seat = seatBalls(body).map(ball => capsule(ball, ball, SEAT.radiusMm, SEAT.radiusMm))
  const trunkCentre = mix(body.pelvis, body.neckBase, 0.6)
  return [
    part('trunk', 'trousers', body.pelvis, [pelvis, ...seat], 30),
    part('trunk', 'belt', body.pelvis, [belt], 60),
    part('trunk', 'shirt', trunkCentre, [shoulders, waist, ...yoke], 20),
  ]
}

type Name = 'lead' | 'trail'

const HIP = { lead: 'leadHip', trail: 'trailHip' } as const
const KNEE = { lead: 'leadKnee', trail: 'trailKnee' } as const
const HEEL = { lead: 'leadHeel', trail: 'trailHeel' } as const
const TOE = { lead: 'leadToe', trail: 'trailToe' } as const
const SHOULDER = { lead: 'leadShoulder', trail: 'trailShoulder' } as const
const ELBOW = { lead: 'leadElbow', trail: 'trailElbow' } as const
const WRIST = { lead: 'leadWrist', trail: 'trailWrist' } as const

function legParts(name: Name, side: Side): Part[] {
  const owner = `${name} leg`
  const cuff = mix(side.knee, side.ankle, 0.94)
  const instep = mix(mix(side.heel, side.toe, 0.36), side.ankle, 0.34)
  return [
    part(owner, 'shoe', mix(side.heel, side.toe, 0.5), [capsule(side.heel, side.toe, 36, 29, { from: HEEL[name], to: TOE[name] }), capsule(instep, mix(side.heel, side.toe, 0.7), 40, 30), capsule(side.ankle, mix(side.heel, side.ankle, 0.4), 39, 38)]),
    part(owner, 'trousers', mix(side.knee, side.ankle, 0.4), [capsule(side.knee, cuff, 62, 49, { from: KNEE[name] })], 10),
    part(owner, 'trousers', mix(side.hip, side.knee, 0.55), [capsule(side.hip, side.knee, 92, 63, { from: HIP[name], to: KNEE[name] })], 20),
  ]
}

function armParts(name: Name, side: Side, body: Skeleton): Part[] {
  const owner = `${name} arm`
  const hem = mix(side.shoulder, side.elbow, 0.72)
  const hand = name === 'lead' ? 60 : 132
  const palm = along(body.gripEnd, body.shaft, hand)
  const fingers = along(body.gripEnd, body.shaft, hand + 74)
  const hands = mix(palm, fingers, 0.5)
  return [
    part(owner, 'skin', mix(side.shoulder, side.elbow, 0.8), [capsule(mix(side.shoulder, side.elbow, 0.5), side.elbow, 46, 41, { to: ELBOW[name] })]),
    part(owner, 'sleeve', mix(side.shoulder, side.elbow, 0.5), [capsule(side.shoulder, hem, 62, 54, { from: SHOULDER[name] })], 30),
    part(owner, 'skin', mix(side.elbow, side.wrist, 0.5), [capsule(side.elbow, side.wrist, 42, 28, { from: ELBOW[name], to: WRIST[name] })], 10),
    part(owner, name === 'lead' ? 'glove' : 'skin', hands, [capsule(palm, fingers, 33, 31), capsule(side.wrist, hands, 29, 30)], 24),
  ]
}

/** Where the skull's middle lies and how large it is. */
export const SKULL_MM = 92

function headParts(body: Skeleton): Part[] {
  const { head, headFrame } = body
  const jaw = add(along(head, headFrame.front, 34), scale(headFrame.up, -58))
  const nose = add(along(head, headFrame.front, 96), scale(headFrame.up, -14))
  const crown = along(head, headFrame.up, 12)
  const dome = [0, 1, 2, 3, 4, 5].flatMap((step) => {
    const angle = step * Math.PI / 11
    return ring(along(head, headFrame.up, 14 + 92 * Math.sin(angle)), headFrame, 92 * Math.cos(angle), 100 * Math.cos(angle))
  })
  const brim = [-58, -40, 0, 40, 58].map(wide => add(along(crown, headFrame.across, wide), scale(headFrame.front, 176 - Math.abs(wide) * 0.75)))
  const nape = add(along(head, headFrame.front, -46), scale(headFrame.up, -26))
  return [
    part('head', 'skin', mix(body.neckBase, head, 0.4), [capsule(body.neckBase, mix(body.neckBase, head, 0.8), 54, 48, { from: 'neckBase' })], -10),
    part('head', 'hair', along(nape, headFrame.front, -40), [capsule(nape, along(nape, headFrame.up, 40), 56, 62)]),
    part('head', 'skin', along(head, headFrame.front, 8), [capsule(head, jaw, SKULL_MM, 58, { from: 'head' }), capsule(nose, along(nose, headFrame.front, -30), 11, 22)], 6),
    part('head', 'cap', along(head, headFrame.up, 40), [{ kind: 'hull', points: dome }], 20),
    part('head', 'cap', along(head, headFrame.front, 120), [{ kind: 'hull', points: [...brim, add(along(crown, headFrame.across, 84), scale(headFrame.front, 40)), add(along(crown, headFrame.across, -84), scale(headFrame.front, 40))] }], 20),
  ]
}
