import { judgeFilm } from '#shared/domain/film/judge'
import type { ClipFacts, SpanS } from './clip-facts'
import { planKeep } from './keep-plan'
import type { PreparedClip } from './prepared-clip'

/** A clip that nothing could be done to: all of it at its own times, and why the server would refuse it, if it would. */
export function asItWas(facts: ClipFacts, keep: readonly SpanS[], setbacks: string[]): Omit<PreparedClip, 'file'> {
  const startS = facts.frameTimesS[0] ?? 0
  const endS = startS + facts.durationMs / 1000
  const swings = keep
    .map(([fromS, toS]): SpanS => [Math.max(startS, fromS), Math.min(endS, toS)])
    .filter(([fromS, toS]) => toS > fromS)
    .sort((a, b) => a[0] - b[0])
  return {
    way: 'untouched',
    frames: facts.frameCount,
    spans: planKeep(facts.frameTimesS, [], endS).spans.map(span => ({ ...span, newS: [startS, endS] })),
    swings: keep.length === 0 ? [[startS, endS]] : swings,
    captureFramesPerSecond: facts.captureFramesPerSecond,
    keptAs: undefined,
    reason: judgeFilm(facts),
    setbacks,
  }
}
