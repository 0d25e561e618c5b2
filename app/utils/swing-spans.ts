import { FILM_MAX_DURATION_MS } from '#shared/domain/film/limits'
import type { ClipFacts, SpanS } from '~/film/prepare'

/** A clip holds at most six swings. */
export const SWINGS_MAX_COUNT = 6
/** Brackets nearer than this could not be told apart, nor pulled apart again. */
export const SWING_MIN_S = 0.3

/** Where the clip begins and ends, in its own seconds. */
export function swingRange({ frameTimesS, durationMs }: Pick<ClipFacts, 'frameTimesS' | 'durationMs'>): SpanS {
  const fromS = frameTimesS[0] ?? 0
  return [fromS, fromS + durationMs / 1000]
}

/** Suggested spans as brackets: within the clip, in order, none over another, six at most. */
export function fitSwings(spans: readonly SpanS[], [startS, endS]: SpanS): SpanS[] {
  return [...spans].sort((a, b) => a[0] - b[0]).slice(0, SWINGS_MAX_COUNT).reduce<SpanS[]>((fit, [fromS, toS]) => {
    const firstS = Math.max(startS, fromS, fit.at(-1)?.[1] ?? startS)
    const lastS = Math.min(endS, toS)
    return lastS - firstS >= Math.min(SWING_MIN_S, endS - startS) ? [...fit, [firstS, lastS]] : fit
  }, [])
}

/** How far one end of a bracket may go: to the neighbours, and not past its other end. */
export function limitsOf(swings: readonly SpanS[], index: number, end: 0 | 1, [startS, endS]: SpanS): SpanS {
  const [fromS, toS] = swings[index] ?? [startS, endS]
  const leastS = Math.min(SWING_MIN_S, endS - startS)
  return end === 0
    ? [swings[index - 1]?.[1] ?? startS, Math.max(toS - leastS, swings[index - 1]?.[1] ?? startS)]
    : [Math.min(fromS + leastS, swings[index + 1]?.[0] ?? endS), swings[index + 1]?.[0] ?? endS]
}

/** One end moved, as far as it may go. */
export function moveEnd(swings: readonly SpanS[], index: number, end: 0 | 1, toS: number, range: SpanS): SpanS[] {
  const [least, most] = limitsOf(swings, index, end, range)
  const atS = Math.min(Math.max(toS, least), most)
  return swings.map((span, at): SpanS => at !== index ? span : end === 0 ? [atS, span[1]] : [span[0], atS])
}

/** One bracket more, in the middle of the widest gap; undefined when there is no room or there are six. */
export function addSwing(swings: readonly SpanS[], [startS, endS]: SpanS): SpanS[] | undefined {
  if (swings.length >= SWINGS_MAX_COUNT) return undefined
  const edges = [startS, ...swings.flat(), endS]
  const gaps = swings.length === 0
    ? [[startS, endS] satisfies SpanS]
    : Array.from({ length: swings.length + 1 }, (_, at): SpanS => [edges[at * 2] ?? startS, edges[at * 2 + 1] ?? endS])
  const widest = gaps.reduce((best, gap) => gap[1] - gap[0] > best[1] - best[0] ? gap : best)
  const widthS = widest[1] - widest[0]
  if (widthS < SWING_MIN_S) return undefined
  const lengthS = Math.max(SWING_MIN_S, Math.min(3, widthS / 2))
  const middleS = (widest[0] + widest[1]) / 2
  return [...swings, [middleS - lengthS / 2, middleS + lengthS / 2] satisfies SpanS].sort((a, b) => a[0] - b[0])
}

/** Seconds of film that are kept. */
export function keptS(swings: readonly SpanS[]): number {
  return swings.reduce((sum, [fromS, toS]) => sum + toS - fromS, 0)
}

/** Longer than a clip may be; it can be told before anything is made. */
export function isTooLong(swings: readonly SpanS[]): boolean {
  return keptS(swings) * 1000 > FILM_MAX_DURATION_MS
}
