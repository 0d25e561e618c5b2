import type { Position } from './swing-kinds'
import type { Swing } from './swing-model'

/** Bisection to far below a frame: a millionth of a second. */
const STEPS = 40
const SCAN_S = 0.002

/**
 * Seconds from impact of every position of a swing, found on the moving model in space: shaft and arm lines where they are level,
 * the top where the turn of the club reverses, impact where the face reaches the back of the ball.
 * @throws when the swing does not reach a position.
 */
export function findPositions(swing: Swing): Record<Position, number> {
  const shaftRise = (t: number): number => swing.skeletonAt(t).shaft.y
  const leadRise = (t: number): number => {
    const { lead } = swing.skeletonAt(t)
    return lead.wrist.y - lead.shoulder.y
  }
  const trailRise = (t: number): number => {
    const { trail } = swing.skeletonAt(t)
    return trail.wrist.y - trail.shoulder.y
  }
  const shaftTurn = (t: number): number => swing.channelsAt(t + 1e-5).shaftAngle - swing.channelsAt(t - 1e-5).shaftAngle
  const top = firstCrossing(shaftTurn, -0.45, -0.1, 'top')
  return {
    address: swing.startS,
    shaft_level_back: firstCrossing(shaftRise, swing.startS + 0.02, top, 'shaft level back'),
    arm_level_back: firstCrossing(leadRise, swing.startS + 0.02, top, 'arm level back'),
    top,
    arm_level_down: firstCrossing(leadRise, top, 0, 'arm level down'),
    shaft_level_down: firstCrossing(shaftRise, top, 0, 'shaft level down'),
    impact: 0,
    shaft_level_through: firstCrossing(shaftRise, 0, swing.endS, 'shaft level through'),
    arm_level_through: firstCrossing(trailRise, 0, swing.endS, 'arm level through'),
    finish: swing.endS,
  }
}

/** The first time in a span at which a quantity changes its sign. @throws when it does not. */
export function firstCrossing(quantity: (t: number) => number, from: number, to: number, what: string): number {
  const start = Math.sign(quantity(from))
  for (let t = from + SCAN_S; t < to + SCAN_S; t += SCAN_S)
    if (Math.sign(quantity(Math.min(t, to))) !== start) return bisect(quantity, t - SCAN_S, Math.min(t, to), start)
  throw new Error(`The swing never comes to ${what}.`)
}

function bisect(quantity: (t: number) => number, from: number, to: number, startSign: number): number {
  let [low, high] = [from, to]
  for (let step = 0; step < STEPS; step++) {
    const middle = (low + high) / 2
    if (Math.sign(quantity(middle)) === startSign) low = middle
    else high = middle
  }
  return (low + high) / 2
}
