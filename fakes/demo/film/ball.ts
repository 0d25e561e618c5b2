import type { Contact, SwingKind } from './swing-kinds'
import { BALL_RADIUS_MM, CLUBS } from './swing-kinds'
import type { Vec3 } from './vector'
import { mix, radians, vec } from './vector'

const GRAVITY_MM_S2 = 9810

/** What a poor strike takes from the speed of the ball and does to its launch. */
const STRIKE: Readonly<Record<Contact, { speedShare: number, launchShare: number }>> = {
  solid: { speedShare: 1, launchShare: 1 },
  fat: { speedShare: 0.62, launchShare: 0.9 },
  thin: { speedShare: 0.9, launchShare: 0.3 },
}

/** Middle of the ball before it is struck. */
export function restingBall(kind: SwingKind): Vec3 {
  return vec(0, CLUBS[kind.club].teeMm + BALL_RADIUS_MM, 0)
}

/** Middle of the ball `t` seconds after impact (before it: at rest), straight at the target and without drag. */
export function ballAt(kind: SwingKind, t: number): Vec3 {
  const from = restingBall(kind)
  if (t <= 0) return from
  const { ballMps, launchDeg } = CLUBS[kind.club]
  const { speedShare, launchShare } = STRIKE[kind.contact]
  const speedMmS = ballMps * 1000 * speedShare
  const launch = radians(launchDeg * launchShare)
  return vec(from.x + speedMmS * Math.cos(launch) * t, from.y + speedMmS * Math.sin(launch) * t - GRAVITY_MM_S2 * t * t / 2, from.z)
}

/** A new ball rolled in from the near side; `share` runs from 0 to 1. */
export function rollingBall(kind: SwingKind, share: number): Vec3 {
  return mix(vec(-420, BALL_RADIUS_MM, 900), restingBall(kind), share)
}

export interface Speck {
  at: Vec3
  radiusMm: number
}

/** Turf thrown up by an iron: a little after a solid strike, a lot from behind the ball after a fat one. */
export function turfAt(kind: SwingKind, t: number): Speck[] {
  const count = kind.club === 'driver' || kind.contact === 'thin' ? 0 : kind.contact === 'fat' ? 22 : 9
  const startX = kind.contact === 'fat' ? -60 : 70
  const sinceS = t - startX / 28_000
  if (sinceS <= 0 || sinceS > 0.5) return []
  return Array.from({ length: count }, (_, index) => {
    const spread = Math.sin(index * 12.9898) * 0.5 + 0.5
    const other = Math.sin(index * 78.233) * 0.5 + 0.5
    const at = vec(startX + (1200 + 3600 * spread) * sinceS, 6 + (900 + 2300 * other) * sinceS - GRAVITY_MM_S2 * sinceS ** 2 / 2, -30 + 500 * (spread - 0.5) * sinceS * 4)
    return { at, radiusMm: 6 + 9 * other }
  }).filter(speck => speck.at.y > 0)
}
