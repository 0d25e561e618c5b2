/** A value at a moment; the rate (per second) where it is known, else it follows from the neighbours. */
export interface Knot {
  t: number
  value: number
  rate?: number
}

interface FullKnot {
  t: number
  value: number
  rate: number
  bend: number
}

/**
 * A curve through the knots whose first and second derivatives are continuous (quintic pieces), at rest before the first
 * knot and after the last one. Rates that are not given are those of Fritsch and Carlson's monotone cubic, so that a joint
 * does not swing past a pose that it stops at.
 * @throws when there are fewer than two knots or their times do not rise.
 */
export function smoothCurve(knots: readonly Knot[]): (t: number) => number {
  const full = complete(knots)
  const first = full[0]
  const last = full.at(-1)
  if (!first || !last) throw new Error('A curve needs two knots.')
  return (t) => {
    if (t <= first.t) return first.value
    if (t >= last.t) return last.value
    const after = full.findIndex(knot => knot.t > t)
    const [from, to] = [full[after - 1], full[after]]
    return from && to ? piece(from, to, t) : last.value
  }
}

function complete(knots: readonly Knot[]): FullKnot[] {
  if (knots.length < 2) throw new Error('A curve needs two knots.')
  const rated = knots.map((knot, index) => ({ ...knot, rate: knot.rate ?? monotoneRate(knots, index) }))
  return rated.map((knot, index) => ({ ...knot, bend: bendAt(rated, index) }))
}

function slope(a: Knot, b: Knot): number {
  if (b.t <= a.t) throw new Error(`Knots must rise in time: ${a.t}, ${b.t}.`)
  return (b.value - a.value) / (b.t - a.t)
}

function monotoneRate(knots: readonly Knot[], index: number): number {
  const [before, here, after] = [knots[index - 1], knots[index], knots[index + 1]]
  if (!before || !here || !after) return 0
  const [left, right] = [slope(before, here), slope(here, after)]
  if (left * right <= 0) return 0
  const [leftS, rightS] = [here.t - before.t, after.t - here.t]
  const weights = [2 * rightS + leftS, rightS + 2 * leftS] as const
  return (weights[0] + weights[1]) / (weights[0] / left + weights[1] / right)
}

/** Mean of the second derivatives that cubics through the neighbours would have here; rest at both ends. */
function bendAt(knots: ReadonlyArray<Required<Knot>>, index: number): number {
  const [before, here, after] = [knots[index - 1], knots[index], knots[index + 1]]
  if (!before || !here || !after) return 0
  const [leftS, rightS] = [here.t - before.t, after.t - here.t]
  const left = (2 * before.rate + 4 * here.rate - 6 * slope(before, here)) / leftS
  const right = (6 * slope(here, after) - 4 * here.rate - 2 * after.rate) / rightS
  return (left + right) / 2
}

function piece(a: FullKnot, b: FullKnot, t: number): number {
  const h = b.t - a.t
  const u = (t - a.t) / h
  const [v0, v1] = [a.rate * h, b.rate * h]
  const [a0, a1] = [a.bend * h * h / 2, b.bend * h * h / 2]
  const rest = b.value - a.value - v0 - a0
  const restRate = v1 - v0 - 2 * a0
  const restBend = a1 - a0
  const c3 = 10 * rest - 4 * restRate + restBend
  const c4 = -15 * rest + 7 * restRate - 2 * restBend
  const c5 = 6 * rest - 3 * restRate + restBend
  return a.value + u * (v0 + u * (a0 + u * (c3 + u * (c4 + u * c5))))
}
