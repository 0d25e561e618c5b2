import type { SpanS } from './clip-facts'

/** Ticks a second of the MP4 files that are written: a multiple of all usual frame rates. */
export const OUTPUT_TIME_BASE = 57_600
/** From any frame a key frame lies this near, so that stepping back decodes at most a tenth of a second. */
export const KEY_GAP_MAX_S = 0.1
const HALF_TICK_S = 0.5 / OUTPUT_TIME_BASE

/** A stretch of the clip that is kept, and where it lies in the new file. Frames half-open; times of the first and the last frame. */
export interface KeptSpan {
  fromFrame: number
  toFrame: number
  oldS: SpanS
  /** Half-open: to the end of its last frame. */
  newS: SpanS
}

export interface KeptFrame {
  oldS: number
  /** A whole number of output ticks. */
  newS: number
  lengthS: number
  isKey: boolean
}

export interface KeepPlan {
  spans: KeptSpan[]
  frames: KeptFrame[]
  /** What was asked to keep, in order of time and in the new file's time, without what held no frame. */
  swings: SpanS[]
}

/**
 * Which frames are kept, when each is shown in the new file, and which are key frames.
 *
 * A frame belongs to a span [from, to) when it begins in it. Spans that overlap or touch become one; others are joined with
 * one median frame between them. Within a span, frames keep their distances to half an output tick (9 µs).
 *
 * @param frameTimesS strictly increasing
 * @param keep in seconds of the old file, in any order; empty keeps everything
 * @param endS end of the last frame
 */
export function planKeep(frameTimesS: readonly number[], keep: readonly SpanS[], endS: number): KeepPlan {
  const asked = (keep.length === 0 ? [[-Infinity, Infinity] satisfies SpanS] : [...keep])
    .map(span => framesIn(frameTimesS, span))
    .filter(range => range.toFrame > range.fromFrame)
    .sort((a, b) => a.fromFrame - b.fromFrame || a.toFrame - b.toFrame)
  const gapS = medianGapS(frameTimesS)
  const spans: KeptSpan[] = []
  const frames: KeptFrame[] = []
  for (const range of joined(asked)) {
    const times = frameTimesS.slice(range.fromFrame, range.toFrame)
    const [firstS = 0] = times
    const startS = spans.at(-1)?.newS[1] ?? 0
    const news = times.map(time => toTick(startS + time - firstS))
    // What follows the last frame was cut away, or is the end of the file, which may lie nearer than a usual frame.
    const lastLengthS = range.toFrame === frameTimesS.length ? Math.max(endS - (times.at(-1) ?? 0), 1 / OUTPUT_TIME_BASE) : gapS
    const newEndS = toTick((news.at(-1) ?? startS) + lastLengthS)
    frames.push(...news.map((newS, index) => ({ oldS: times[index] ?? 0, newS, lengthS: (news[index + 1] ?? newEndS) - newS, isKey: false })))
    // Joined with a median frame, whatever length the last one has.
    spans.push({ ...range, oldS: [firstS, times.at(-1) ?? firstS], newS: [startS, newEndS] })
  }
  markKeys(frames, new Set(startsOf(spans)))
  return { spans, frames, swings: asked.map(range => toNew(range, spans, frames)) }
}

/** Length of the new film in seconds. */
export function lengthOf(plan: KeepPlan): number {
  return plan.spans.at(-1)?.newS[1] ?? 0
}

type FrameRange = Pick<KeptSpan, 'fromFrame' | 'toFrame'>

/** Times are compared with half a tick to spare: they come from sliders and sums. */
function framesIn(frameTimesS: readonly number[], [fromS, toS]: SpanS): FrameRange {
  const firstAtOrAfter = (timeS: number) => {
    const found = frameTimesS.findIndex(frameS => frameS >= timeS - HALF_TICK_S)
    return found === -1 ? frameTimesS.length : found
  }
  return { fromFrame: firstAtOrAfter(fromS), toFrame: firstAtOrAfter(toS) }
}

function joined(ranges: readonly FrameRange[]): FrameRange[] {
  return ranges.reduce<FrameRange[]>((done, range) => {
    const last = done.at(-1)
    if (!last || range.fromFrame > last.toFrame) return [...done, { ...range }]
    return [...done.slice(0, -1), { fromFrame: last.fromFrame, toFrame: Math.max(last.toFrame, range.toFrame) }]
  }, [])
}

function medianGapS(frameTimesS: readonly number[]): number {
  const gaps = frameTimesS.slice(1).map((time, index) => time - (frameTimesS[index] ?? time)).sort((a, b) => a - b)
  return gaps[Math.floor(gaps.length / 2)] ?? 1 / 30
}

function toTick(timeS: number): number {
  return Math.round(timeS * OUTPUT_TIME_BASE) / OUTPUT_TIME_BASE
}

function startsOf(spans: readonly KeptSpan[]): number[] {
  let count = 0
  return spans.map(({ fromFrame, toFrame }) => {
    const start = count
    count += toFrame - fromFrame
    return start
  })
}

/** A frame becomes a key frame when the next one would lie too far from the last: waiting for it would be too late. */
function markKeys(frames: KeptFrame[], starts: ReadonlySet<number>): void {
  let lastKeyS = -Infinity
  frames.forEach((frame, index) => {
    const endS = frame.newS + frame.lengthS
    frame.isKey = starts.has(index) || endS - lastKeyS > KEY_GAP_MAX_S + HALF_TICK_S
    if (frame.isKey) lastKeyS = frame.newS
  })
}

function toNew(range: FrameRange, spans: readonly KeptSpan[], frames: readonly KeptFrame[]): SpanS {
  const starts = startsOf(spans)
  const at = spans.findIndex(span => range.fromFrame >= span.fromFrame && range.toFrame <= span.toFrame)
  const offset = (starts[at] ?? 0) - (spans[at]?.fromFrame ?? 0)
  const first = frames[range.fromFrame + offset]
  const last = frames[range.toFrame - 1 + offset]
  return [first?.newS ?? 0, last ? last.newS + last.lengthS : 0]
}
