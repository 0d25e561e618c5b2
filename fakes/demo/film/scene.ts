import type { ClipView } from '#shared/types/reviews'
import type { Vec3 } from './vector'
import { vec } from './vector'

/** A true vertical far behind the golfer: two points for level. */
export const FLAG: Readonly<Record<ClipView, { foot: Vec3, top: Vec3 }>> = {
  face_on: { foot: vec(9500, 0, -42_000), top: vec(9500, 2500, -42_000) },
  down_the_line: { foot: vec(90_000, 0, -9_500), top: vec(90_000, 5_200, -9_500) },
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
export const STICKS: Readonly<Record<ClipView, readonly [Stick, Stick]>> = {
  face_on: [ALONG_TOES, SQUARE],
  down_the_line: [SQUARE, ALONG_TOES],
}

/** Light of a low sun; shadows fall behind the golfer as each camera sees him. */
export const LIGHT: Readonly<Record<ClipView, Vec3>> = {
  face_on: vec(0.62, -1, -0.5),
  down_the_line: vec(0.5, -1, -0.62),
}
