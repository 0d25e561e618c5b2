import type { Camera } from './camera'
import { project } from './camera'
import type { FilmClip } from './clips'
import { findPositions } from './positions'
import type { Skeleton } from './skeleton'
import type { Swing } from './swing-model'
import type { TimedSwing } from './timeline'
import { timelineOf } from './timeline'
import { degrees, distance } from './vector'

export interface FaceOnTruth {
  /** Plumb line under the grip end from the ball along the target line with the shaft level on the way down, + toward the target. */
  gripEndOffsetCm: number
  /** The same in the last frame before contact. */
  gripEndOffsetLastFrameCm: number
  /** Club head to grip end from the vertical at impact, + toward the target, as the camera sees it. */
  shaftLeanDeg: number
  /** Lead forearm to shaft with the shaft level on the way down, + while the head trails, as the camera sees it. */
  forearmToShaftDeg: number
  /** Where the marked point of the club head is lowest, from the ball along the target line, + toward the target. */
  lowPointCm: number
}

export interface SwingTruth {
  backswingS: number
  downswingS: number
  tempo: number
  headSpeedMps: number
  /** Undefined down the line, where these do not show. */
  faceOn: FaceOnTruth | undefined
}

/**
 * The figures that a letter may state about a clip, one entry a swing. Distances are those of the model in space (what a
 * measurement corrected for depth must find); angles are those of the picture, at the exact moment and without a frame's doubt.
 */
export function measuredTruth(clip: FilmClip): SwingTruth[] {
  const timeline = timelineOf(clip)
  return timeline.swings.map((timed) => {
    const found = findPositions(timed.swing)
    const backswingS = found.top - found.address
    const downswingS = found.impact - found.top
    return {
      backswingS, downswingS, tempo: backswingS / downswingS,
      headSpeedMps: headSpeedMps(timed.swing, -0.001),
      faceOn: clip.view === 'face_on' ? faceOnTruth(timeline.camera, timed, clip) : undefined,
    }
  })
}

/** The lowest point lies within this of impact, in every swing made here. */
const SEARCH_S = 0.02

/** Speed of the club head in m/s, `t` seconds from impact. */
export function headSpeedMps(swing: Swing, t: number): number {
  const halfS = 1e-4
  return distance(swing.skeletonAt(t - halfS).clubHead, swing.skeletonAt(t + halfS).clubHead) / (2 * halfS) / 1000
}

function faceOnTruth(camera: Camera, { swing, impactS }: TimedSwing, clip: FilmClip): FaceOnTruth {
  const level = swing.skeletonAt(findPositions(swing).shaft_level_down)
  const lastFrameS = Math.floor(impactS * clip.framesPerSecond) / clip.framesPerSecond
  return {
    gripEndOffsetCm: level.gripEnd.x / 10,
    gripEndOffsetLastFrameCm: swing.skeletonAt(lastFrameS - impactS).gripEnd.x / 10,
    shaftLeanDeg: shaftLeanDeg(camera, swing.skeletonAt(0)),
    forearmToShaftDeg: forearmToShaftDeg(camera, level),
    lowPointCm: lowPointMm(swing) / 10,
  }
}

// The model's own golfer plays toward +x, and a camera that sees him the other way round sees the same angles reversed with the target.

function shaftLeanDeg(camera: Camera, body: Skeleton): number {
  const [head, grip] = [project(camera, body.clubHead), project(camera, body.gripEnd)]
  return degrees(Math.atan2(grip.x - head.x, head.y - grip.y))
}

function forearmToShaftDeg(camera: Camera, { lead, clubHead }: Skeleton): number {
  const [elbow, wrist, head] = [project(camera, lead.elbow), project(camera, lead.wrist), project(camera, clubHead)]
  const [ux, uy] = [wrist.x - elbow.x, wrist.y - elbow.y]
  const [vx, vy] = [head.x - wrist.x, head.y - wrist.y]
  return degrees(Math.atan2(ux * vy - uy * vx, ux * vx + uy * vy))
}

/** Where the marked point of the club head is lowest near impact, in mm from the middle of the ball along the target line. */
function lowPointMm(swing: Swing): number {
  let lowest = swing.skeletonAt(-SEARCH_S).clubHead
  for (let t = -SEARCH_S; t < SEARCH_S; t += 1e-5) {
    const { clubHead } = swing.skeletonAt(t)
    if (clubHead.y < lowest.y) lowest = clubHead
  }
  return lowest.x
}
