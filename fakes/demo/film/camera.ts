import type { ClipView } from '#shared/types/reviews'
import type { ClubKind, Hands } from './swing-kinds'
import type { Vec3 } from './vector'
import { cross, dot, subtract, vec } from './vector'

/** Every clip is upright, as a phone films. */
export const WIDTH_PX = 720
export const HEIGHT_PX = 1280

/** From the lens to the ball, in mm: five big steps. */
export const CAMERA_TO_BALL_MM = 4500

/** Height of the lens: the hands at address. */
const LENS_HEIGHT_MM = 800

export interface Camera {
  view: ClipView
  at: Vec3
  forward: Vec3
  right: Vec3
  focalPx: number
}

export interface Pixel {
  x: number
  y: number
}

export interface Projected extends Pixel {
  /** From the camera along its axis, in mm. */
  depthMm: number
  /** Length in the picture of one mm at that depth. */
  pxPerMm: number
}

/** Width of the picture at the ball: the club must stay in it, face-on from level to level, down the line from top to toe. */
const WIDTH_AT_BALL_MM: Readonly<Record<ClipView, Readonly<Record<ClubKind, number>>>> = {
  face_on: { '7-iron': 2620, 'driver': 2860 },
  down_the_line: { '7-iron': 2240, 'driver': 2500 },
}

/**
 * An ideal camera, square and level: face-on at the ball and square to the target line, down the line on a line through the
 * hands. For a left-hander the same camera stands on the same side of the ground; what it sees is the other way round.
 */
export function cameraFor(view: ClipView, club: ClubKind, hands: Hands): Camera {
  const focalPx = WIDTH_PX * CAMERA_TO_BALL_MM / WIDTH_AT_BALL_MM[view][club]
  const side = hands === 'right' ? 1 : -1
  const up = vec(0, 1, 0)
  const forward = view === 'face_on' ? vec(0, 0, -1) : vec(side, 0, 0)
  const at = view === 'face_on' ? vec(0, LENS_HEIGHT_MM, CAMERA_TO_BALL_MM) : vec(-side * CAMERA_TO_BALL_MM, LENS_HEIGHT_MM, club === 'driver' ? -660 : -470)
  return { view, at, forward, right: cross(forward, up), focalPx }
}

/** Where a point falls in the upright frame, in pixels from the top left. @throws for a point at or behind the lens. */
export function project(camera: Camera, point: Vec3): Projected {
  const offset = subtract(point, camera.at)
  const depthMm = dot(offset, camera.forward)
  if (depthMm < 100) throw new Error('A point behind the lens has no place in the picture.')
  const pxPerMm = camera.focalPx / depthMm
  return { x: WIDTH_PX / 2 + dot(offset, camera.right) * pxPerMm, y: HEIGHT_PX / 2 - offset.y * pxPerMm, depthMm, pxPerMm }
}

/** Length on the target line's depth (face-on) or across it (down the line) of one pixel at the ball, in mm. */
export function mmPerPixelAtBall(camera: Camera): number {
  return CAMERA_TO_BALL_MM / camera.focalPx
}
