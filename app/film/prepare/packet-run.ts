/** One packet of the picture, in decode order among its neighbours. Ticks are those of its track. */
export interface PacketTime {
  tick: number
  lengthTicks: number
  isKey: boolean
  bytes: number
}

/** Packets that follow each other in decode order; half-open. */
export interface PacketRun {
  from: number
  to: number
}

/**
 * Times of all frames shown. Two frames at one instant count once: only one of them is ever seen.
 *
 * @param shown half-open; undefined when all frames are
 * @returns ticks strictly increasing, and how long the film is from the start of its first frame to the end of its last
 */
export function listShownFrames(packets: readonly PacketTime[], shown: { startTick: number, endTick: number } | undefined): { frameTicks: number[], lengthTicks: number } {
  const { startTick, endTick } = shown ?? { startTick: -Infinity, endTick: Infinity }
  const inside = packets.filter(({ tick }) => tick >= startTick && tick < endTick)
  const frameTicks = [...new Set(inside.map(packet => packet.tick))].sort((a, b) => a - b)
  const end = inside.reduce((latest, { tick, lengthTicks }) => Math.max(latest, Math.min(endTick, tick + lengthTicks)), -Infinity)
  const [first] = frameTicks
  return { frameTicks, lengthTicks: first === undefined ? 0 : end - first }
}

/** The longest way from a shown key frame to the next one, or to the end; from the start too, when that is no key frame. */
export function longestKeyGapTicks(packets: readonly PacketTime[], frameTicks: readonly number[], lengthTicks: number): number {
  const [first] = frameTicks
  if (first === undefined) return 0
  const end = first + lengthTicks
  const keys = packets.filter(({ isKey, tick }) => isKey && tick > first && tick < end).map(({ tick }) => tick).sort((a, b) => a - b)
  return [...keys, end].reduce(({ longest, last }, tick) => ({ longest: Math.max(longest, tick - last), last: tick }), { longest: 0, last: first }).longest
}

/**
 * Packets that hold exactly the frames of a span and need no others: they follow each other in decode order and begin with
 * a key frame that is also the first one shown. Only then may they be copied without leaving anything outside the span in
 * the file, and without being undecodable.
 *
 * @param span first and last frame, in ticks, both inside
 * @returns undefined when there is no such run
 */
export function findExactRun(packets: readonly PacketTime[], span: { firstTick: number, lastTick: number }): PacketRun | undefined {
  const from = packets.findIndex(({ tick }) => tick >= span.firstTick && tick <= span.lastTick)
  const first = packets[from]
  if (!first?.isKey || first.tick !== span.firstTick) return undefined
  const isInside = ({ tick }: PacketTime) => tick >= span.firstTick && tick <= span.lastTick
  const after = packets.findIndex((packet, index) => index > from && !isInside(packet))
  const to = after === -1 ? packets.length : after
  if (packets.slice(to).some(isInside)) return undefined
  const ticks = packets.slice(from, to).map(({ tick }) => tick)
  return new Set(ticks).size === ticks.length ? { from, to } : undefined
}

/** The least run that lets every shown frame be decoded; it may begin with frames that are not shown. */
export function findWholeRun(packets: readonly PacketTime[], frameTicks: readonly number[]): PacketRun {
  const shown = new Set(frameTicks)
  const firstShown = packets.findIndex(({ tick }) => shown.has(tick))
  const key = packets.slice(0, firstShown + 1).map(({ isKey }) => isKey).lastIndexOf(true)
  const last = packets.map(({ tick }) => shown.has(tick)).lastIndexOf(true)
  return { from: Math.max(0, key), to: last + 1 }
}
