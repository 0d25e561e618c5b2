import { ballAt, rollingBall, turfAt } from './ball'
import type { Speck } from './ball'
import type { Camera } from './camera'
import { cameraFor, HEIGHT_PX, project, WIDTH_PX } from './camera'
import type { FilmClip } from './clips'
import { recordOf } from './record-of'
import type { Channels, Frame, Side, Skeleton } from './skeleton'
import { skeletonAt } from './skeleton'
import { CHANNELS } from './swing-keys'
import { BALL_RADIUS_MM, CLUBS } from './swing-kinds'
import type { Swing } from './swing-model'
import { makeSwing, stanceFor } from './swing-model'
import type { Vec3 } from './vector'
import { mirrored } from './vector'

/** Ticks a second of the files' own clock; 120 and 240 frames a second divide it. */
export const TIMESCALE = 57_600

const STILL_BEFORE_S = 0.3
const STILL_AFTER_S = 0.3
/** From one finish to the next address: a new ball is rolled in, and the club comes down over it and is set behind it. */
const BETWEEN_S = 1.2
const SHARE_TO_HOVER = 0.72
/** How far the arms are drawn in so that the club passes over the ball. */
const DRAWN_IN_MM = 150
/** Impact falls between two frames, as it does on real film. */
const IMPACT_BETWEEN_FRAMES = 0.37

export interface TimedSwing {
  swing: Swing
  /** Seconds from the first frame. */
  impactS: number
}

export interface Timeline {
  clip: FilmClip
  camera: Camera
  swings: TimedSwing[]
  frameCount: number
}

export interface Moment {
  body: Skeleton
  /** Undefined while there is no ball to be seen. */
  ball: Vec3 | undefined
  turf: Speck[]
}

/** When what happens in a clip. */
export function timelineOf(clip: FilmClip): Timeline {
  const swings: TimedSwing[] = []
  let readyS = STILL_BEFORE_S
  for (const { release, contact } of clip.swings) {
    const swing = makeSwing({ release, contact, club: clip.club, hands: clip.hands })
    const frame = Math.ceil((readyS - swing.startS) * clip.framesPerSecond)
    const impactS = (frame + IMPACT_BETWEEN_FRAMES) / clip.framesPerSecond
    swings.push({ swing, impactS })
    readyS = impactS + swing.endS + STILL_AFTER_S + BETWEEN_S + STILL_BEFORE_S
  }
  const lastsS = readyS - BETWEEN_S - STILL_BEFORE_S
  return { clip, camera: cameraFor(clip.view, clip.club, clip.hands), swings, frameCount: Math.ceil(lastsS * clip.framesPerSecond) }
}

/** Golfer, ball and turf at a time of the clip, as they stand on the ground (left-handers the other way round). */
export function momentAt(timeline: Timeline, clipS: number): Moment {
  const { now, next } = swingsAround(timeline, clipS)
  const { clip, camera } = timeline
  const t = clipS - now.impactS
  const share = next ? Math.min(1, Math.max(0, (t - now.swing.endS - STILL_AFTER_S) / BETWEEN_S)) : 0
  const own = now.swing.channelsAt(t)
  const channels = next && share > 0 ? betweenSwings(own, next.swing.channelsAt(next.swing.startS), share) : own
  const body = skeletonAt(channels, stanceFor(now.swing.kind), CLUBS[clip.club].lengthMm)
  const ball = share > 0.1 ? rollingBall(now.swing.kind, smooth((share - 0.1) / 0.45)) : ballAt(now.swing.kind, t)
  const turned = (point: Vec3): Vec3 => clip.hands === 'right' ? point : mirrored(point)
  const seen = ball && isBallSeen(camera, turned(ball)) ? turned(ball) : undefined
  return {
    body: clip.hands === 'right' ? body : mirroredSkeleton(body),
    ball: seen,
    turf: turfAt(now.swing.kind, t).map(speck => ({ ...speck, at: turned(speck.at) })),
  }
}

function swingsAround(timeline: Timeline, clipS: number): { now: TimedSwing, next: TimedSwing | undefined } {
  const begun = timeline.swings.filter((timed, index) => index === 0 || clipS >= timed.impactS + timed.swing.startS - STILL_BEFORE_S)
  const now = begun.at(-1)
  if (!now) throw new Error(`The clip ${timeline.clip.name} has no swing.`)
  return { now, next: timeline.swings[begun.length] }
}

/** A ball far away or outside the picture cannot be marked. */
function isBallSeen(camera: Camera, ball: Vec3): boolean {
  const place = project(camera, ball)
  const radiusPx = BALL_RADIUS_MM * place.pxPerMm
  return radiusPx > 0.5 && place.x > -radiusPx && place.x < WIDTH_PX + radiusPx && place.y > -radiusPx && place.y < HEIGHT_PX + radiusPx
}

/** From 0 to 1 with rest at both ends, first and second derivative alike. */
function smooth(share: number): number {
  const u = Math.min(1, Math.max(0, share))
  return u ** 3 * (10 - 15 * u + 6 * u * u)
}

/** From finish to address by way of a club that hovers behind the ball. */
function betweenSwings(finish: Channels, address: Channels, share: number): Channels {
  const hover = { ...address, armAngle: address.armAngle - 5, shaftAngle: address.shaftAngle - 17 }
  if (share >= SHARE_TO_HOVER) return blend(hover, address, smooth((share - SHARE_TO_HOVER) / (1 - SHARE_TO_HOVER)))
  const down = smooth(share / SHARE_TO_HOVER)
  const lowered = blend(finish, hover, down)
  // Greatest where the club passes over the ball, nothing at either end.
  return { ...lowered, reach: lowered.reach - DRAWN_IN_MM * down ** 9 * (1 - down) / 0.9 ** 9 / 0.1 }
}

function blend(from: Channels, to: Channels, share: number): Channels {
  return recordOf(CHANNELS, channel => from[channel] * (1 - share) + to[channel] * share)
}

function mirroredSkeleton(body: Skeleton): Skeleton {
  return {
    pelvis: mirrored(body.pelvis), pelvisFrame: mirroredFrame(body.pelvisFrame),
    neckBase: mirrored(body.neckBase), chestFrame: mirroredFrame(body.chestFrame),
    head: mirrored(body.head), headFrame: mirroredFrame(body.headFrame),
    lead: mirroredSide(body.lead), trail: mirroredSide(body.trail),
    gripEnd: mirrored(body.gripEnd), clubHead: mirrored(body.clubHead),
    shaft: mirrored(body.shaft), clubToe: mirrored(body.clubToe), clubFace: mirrored(body.clubFace),
  }
}

function mirroredFrame({ across, up, front }: Frame): Frame {
  return { across: mirrored(across), up: mirrored(up), front: mirrored(front) }
}

function mirroredSide(side: Side): Side {
  return {
    shoulder: mirrored(side.shoulder), elbow: mirrored(side.elbow), wrist: mirrored(side.wrist), hip: mirrored(side.hip),
    knee: mirrored(side.knee), ankle: mirrored(side.ankle), heel: mirrored(side.heel), toe: mirrored(side.toe),
  }
}

/** The time of a frame: whole ticks, since that is what the file holds. */
export function frameTicks(clip: FilmClip, index: number): number {
  return index * TIMESCALE / clip.framesPerSecond
}
