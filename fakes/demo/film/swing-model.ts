import type { Channels, Skeleton, Stance } from './skeleton'
import { skeletonAt } from './skeleton'
import { recordOf } from './record-of'
import { smoothCurve } from './spline'
import { CHANNELS, positionTimes, swingKnots } from './swing-keys'
import type { SwingKind } from './swing-kinds'
import { BALL_RADIUS_MM, CLUBS, SOLE_AT_BALL_MM } from './swing-kinds'
import type { Vec3 } from './vector'
import { subtract, vec } from './vector'

/** A swing as a moving body. Times in seconds from impact; the golfer's target lies toward +x whichever hand he plays with. */
export interface Swing {
  kind: SwingKind
  /** Still before it, moving after it. */
  startS: number
  /** Still from here on. */
  endS: number
  channelsAt: (t: number) => Channels
  skeletonAt: (t: number) => Skeleton
}

const ADDRESS = 0
const IMPACT = 6

/** Where the feet stand: heels 0.42 m apart for an iron, wider for a driver; the ball a little forward of the middle. */
export function stanceFor(kind: SwingKind): Stance {
  const wide = kind.club === 'driver'
  return {
    leadAnkle: vec(wide ? 104 : 150, 0, wide ? -1038 : -768),
    trailAnkle: vec(wide ? -386 : -272, 0, wide ? -1038 : -768),
    leadFlareDeg: 24,
    trailFlareDeg: 8,
  }
}

/** Where the axis of the shaft meets the sole when the face reaches the back of the ball. */
export function strikePoint(kind: SwingKind): Vec3 {
  const club = CLUBS[kind.club]
  return vec(-BALL_RADIUS_MM - club.behindBallMm, club.teeMm + SOLE_AT_BALL_MM[kind.contact], -club.insideBallMm)
}

/** Where the club rests at address: soled behind the ball. */
export function addressPoint(kind: SwingKind): Vec3 {
  const club = CLUBS[kind.club]
  return vec(-BALL_RADIUS_MM - club.behindBallMm - 4, 0, -club.insideBallMm)
}

/**
 * A swing whose club head stands behind the ball at address and meets it at 0 s exactly. The body is shifted by what the keys
 * leave over at those two poses (see `leftOver`), so that a change of a key cannot make the golfer miss.
 */
export function makeSwing(kind: SwingKind): Swing {
  const knots = swingKnots(kind.release, kind.club)
  const times = positionTimes(kind.release)
  for (const { index, shift } of leftOver(kind)) {
    const moved = { pelvisX: shift.x, pelvisY: shift.y, pelvisZ: shift.z }
    for (const channel of ['pelvisX', 'pelvisY', 'pelvisZ'] as const) {
      const knot = knots[channel][index]
      if (knot) knot.value += moved[channel]
    }
  }
  const curves = recordOf(CHANNELS, channel => smoothCurve(knots[channel]))
  const channelsAt = (t: number): Channels => recordOf(CHANNELS, channel => curves[channel](t))
  const clubMm = CLUBS[kind.club].lengthMm
  return {
    kind,
    startS: times[0],
    endS: times[10],
    channelsAt,
    skeletonAt: t => skeletonAt(channelsAt(t), stanceFor(kind), clubMm),
  }
}

/** How far the keys alone would leave the club head from where it must be, at address and at impact. */
export function leftOver(kind: SwingKind): Array<{ index: number, shift: Vec3 }> {
  const knots = swingKnots(kind.release, kind.club)
  return [
    { index: ADDRESS, at: addressPoint(kind) },
    { index: IMPACT, at: strikePoint(kind) },
  ].map(({ index, at }) => {
    const channels = recordOf(CHANNELS, channel => knots[channel][index]?.value ?? 0)
    const { clubHead } = skeletonAt(channels, stanceFor(kind), CLUBS[kind.club].lengthMm)
    return { index, shift: subtract(at, clubHead) }
  })
}
