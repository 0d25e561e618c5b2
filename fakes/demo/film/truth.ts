import { CAMERA_TO_BALL_MM, HEIGHT_PX, mmPerPixelAtBall, project, WIDTH_PX } from './camera'
import type { Camera, Pixel } from './camera'
import { SEAT, seatBalls } from './body-shapes'
import { isHidden, occludersOf } from './occlusion'
import type { Mark } from './marks'
import { MARKS } from './marks'
import { findPositions } from './positions'
import { recordOf } from './record-of'
import { groundFor, STICK_MM } from './scene'
import type { Skeleton } from './skeleton'
import { CLUBS } from './swing-kinds'
import type { Moment, TimedSwing, Timeline } from './timeline'
import { frameTicks, momentAt, TIMESCALE } from './timeline'
import type { Truth } from './truth-file'
import { QUANTUM } from './truth-file'
import type { Vec3 } from './vector'
import { dot } from './vector'

export interface SeenMark {
  at: Pixel
  isHidden: boolean
}

/** Where a mark lies in space; undefined for a ball that is not there. */
export function markPoint(moment: Moment, mark: Mark): Vec3 | undefined {
  return mark === 'ball' ? moment.ball : bodyPoint(moment.body, mark)
}

function bodyPoint(body: Skeleton, mark: Exclude<Mark, 'ball'>): Vec3 {
  const { lead, trail } = body
  const points: Record<Exclude<Mark, 'ball'>, Vec3> = {
    gripEnd: body.gripEnd, clubHead: body.clubHead, neckBase: body.neckBase, head: body.head,
    leadShoulder: lead.shoulder, leadElbow: lead.elbow, leadWrist: lead.wrist, leadHip: lead.hip, leadKnee: lead.knee, leadHeel: lead.heel, leadToe: lead.toe,
    trailShoulder: trail.shoulder, trailElbow: trail.elbow, trailWrist: trail.wrist, trailHip: trail.hip, trailKnee: trail.knee, trailHeel: trail.heel, trailToe: trail.toe,
    seatRear: seatRear(body),
  }
  return points[mark]
}

function seatRear(body: Skeleton): Vec3 {
  const rear = seatBalls(body).reduce((a, b) => a.z < b.z ? a : b)
  return { ...rear, z: rear.z - SEAT.radiusMm }
}

/** Every mark of a moment in pixels of the frame. A ball that is not there lies in the corner and is hidden. */
export function marksAt(timeline: Timeline, clipS: number): Record<Mark, SeenMark> {
  const moment = momentAt(timeline, clipS)
  const occluders = occludersOf(timeline.camera, moment.body, timeline.clip.club)
  const seen = (mark: Mark): SeenMark => {
    const point = markPoint(moment, mark)
    if (!point) return { at: { x: 0, y: 0 }, isHidden: true }
    const { x, y } = project(timeline.camera, point)
    return { at: { x, y }, isHidden: isOutside({ x, y }) || isHidden(occluders, mark, point) }
  }
  return recordOf(MARKS, seen)
}

function isOutside(at: Pixel): boolean {
  return at.x < 0 || at.x > WIDTH_PX || at.y < 0 || at.y > HEIGHT_PX
}

/** All that is known of a clip, without what only drawing it can tell. */
export function makeTruth(timeline: Timeline): Omit<Truth, 'drawnWithinPx'> {
  const { clip, camera } = timeline
  const ticks = Array.from({ length: timeline.frameCount }, (_, index) => frameTicks(clip, index))
  const frames = ticks.map(tick => marksAt(timeline, tick / TIMESCALE))
  return {
    name: clip.name, view: clip.view, hands: clip.hands, club: clip.club, clubLengthMm: CLUBS[clip.club].lengthMm,
    framesPerSecond: clip.framesPerSecond, widthPx: WIDTH_PX, heightPx: HEIGHT_PX,
    camera: { toBallMm: CAMERA_TO_BALL_MM, lensHeightMm: camera.at.y, offSquareDeg: 0, mmPerPixelAtBall: rounded(mmPerPixelAtBall(camera), 5) },
    timescale: TIMESCALE, ticks, seconds: ticks.map(tick => rounded(tick / TIMESCALE, 6)),
    swings: timeline.swings.map((timed, index) => swingTruth(timed, clip.swings[index]?.contact ?? 'solid')),
    ...groundTruth(timeline),
    marks: tracksOf(frames),
  }
}

function swingTruth({ swing, impactS }: TimedSwing, contact: Truth['swings'][number]['contact']): Truth['swings'][number] {
  const found = findPositions(swing)
  const at = (seconds: number): number => rounded(impactS + seconds, 6)
  return { release: swing.kind.release, contact, positionsS: {
    address: at(found.address), shaft_level_back: at(found.shaft_level_back), arm_level_back: at(found.arm_level_back), top: at(found.top),
    arm_level_down: at(found.arm_level_down), shaft_level_down: at(found.shaft_level_down), impact: at(found.impact),
    shaft_level_through: at(found.shaft_level_through), arm_level_through: at(found.arm_level_through), finish: at(found.finish),
  } }
}

function groundTruth({ clip, camera }: Timeline): Pick<Truth, 'level' | 'scale'> {
  const { flag, sticks } = groundFor(clip.view, clip.hands)
  const [stick] = sticks
  if (!stick) throw new Error('No stick lies on the ground.')
  return {
    level: { foot: fraction(camera, flag.foot), top: fraction(camera, flag.top) },
    scale: {
      from: fraction(camera, stick.from), to: fraction(camera, stick.to), lengthMm: STICK_MM,
      behindBallMm: dot(stick.from, camera.forward),
    },
  }
}

function fraction(camera: Camera, point: Vec3): [number, number] {
  const { x, y } = project(camera, point)
  return [rounded(x / WIDTH_PX, 5), rounded(y / HEIGHT_PX, 5)]
}

function tracksOf(frames: ReadonlyArray<Record<Mark, SeenMark>>): Truth['marks'] {
  const track = (mark: Mark): Truth['marks'][Mark] => ({
    x: frames.map(frame => Math.round(frame[mark].at.x / WIDTH_PX * QUANTUM)),
    y: frames.map(frame => Math.round(frame[mark].at.y / HEIGHT_PX * QUANTUM)),
    hidden: ranges(frames.map(frame => frame[mark].isHidden)),
  })
  return recordOf(MARKS, track)
}

/** Half-open ranges of indexes that are true. */
export function ranges(flags: readonly boolean[]): Array<[number, number]> {
  const found: Array<[number, number]> = []
  flags.forEach((flag, index) => {
    const last = found.at(-1)
    if (!flag) return
    if (last && last[1] === index) last[1] = index + 1
    else found.push([index, index + 1])
  })
  return found
}

function rounded(value: number, places: number): number {
  return Number(value.toFixed(places))
}
