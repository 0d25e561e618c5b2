import type { ClipView } from '#shared/types/reviews'
import type { Camera } from './camera'
import type { Hands } from './swing-kinds'
import type { Vec3 } from './vector'
import { add, mirrored, scale, vec } from './vector'

/** A true vertical far behind the golfer: two points for level. */
const FLAG: Readonly<Record<ClipView, { foot: Vec3, top: Vec3 }>> = {
  face_on: { foot: vec(9500, 0, -42_000), top: vec(9500, 2500, -42_000) },
  down_the_line: { foot: vec(90_000, 0, 6_500), top: vec(90_000, 5_200, 6_500) },
}

interface Stick {
  from: Vec3
  to: Vec3
}

/**
 * Alignment sticks of 1.00 m on the ground, whose ends are two points for scale: one along the toes, one square to it outside the
 * trail foot. A view shows both; the one that lies across the picture gives its scale.
 */
const ALONG_TOES: Stick = { from: vec(-560, 4, -512), to: vec(440, 4, -512) }
const SQUARE: Stick = { from: vec(-640, 4, -1180), to: vec(-640, 4, -180) }

export const STICK_MM = 1000
const STICKS: Readonly<Record<ClipView, readonly [Stick, Stick]>> = {
  face_on: [ALONG_TOES, SQUARE],
  down_the_line: [SQUARE, ALONG_TOES],
}

/** Light from the upper left behind the camera: shadows fall away from it and to the right of the picture. */
export function lightFor(camera: Camera): Vec3 {
  return add(vec(0, -1, 0), add(scale(camera.right, 0.6), scale(camera.forward, 0.5)))
}

/** What stands on the ground for a golfer of either hand: the target of a left-hander lies the other way. */
export function groundFor(view: ClipView, hands: Hands) {
  const turned = (point: Vec3): Vec3 => hands === 'right' ? point : mirrored(point)
  const { foot, top } = FLAG[view]
  return {
    flag: { foot: turned(foot), top: turned(top) },
    sticks: STICKS[view].map(({ from, to }) => ({ from: turned(from), to: turned(to) })),
  }
}
