/** A gap of 100 ticks rounds to within half a percent, less than lies between any two rates phones film at. */
const SPAN_MIN_TICKS = 100

/**
 * Median frame rate of a film.
 *
 * The median of the gaps between neighbouring frames, so that one pause or one dropped frame does not move it.
 * Where the time base is so coarse that a gap is under 100 ticks (WebM counts milliseconds: 240 a second is
 * 4, 4, 4, 4, 5), gaps over several frames are taken instead, as many as make 100 ticks.
 *
 * @param ticks strictly increasing
 * @param timeBase ticks in a second, above 0
 * @returns frames a second; 0 with fewer than two frames
 */
export function medianFramesPerSecond(ticks: readonly number[], timeBase: number): number {
  const gap = medianSpan(ticks, 1)
  if (gap === 0)
    return 0
  const frames = Math.min(Math.max(1, Math.ceil(SPAN_MIN_TICKS / gap)), ticks.length - 1)
  return (timeBase * frames) / medianSpan(ticks, frames)
}

function medianSpan(ticks: readonly number[], frames: number): number {
  const spans = ticks.slice(frames).map((tick, index) => tick - (ticks[index] ?? tick)).sort((a, b) => a - b)
  const middle = spans.length >> 1
  const upper = spans[middle] ?? 0
  return spans.length % 2 === 1 ? upper : (upper + (spans[middle - 1] ?? upper)) / 2
}
