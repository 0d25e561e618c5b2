import { isShownByBrowsers } from '#shared/domain/film/judge'
import { FILM_MAX_BYTES } from '#shared/domain/film/limits'
import type { ClipFacts } from './clip-facts'
import type { CopiedRun } from './copy-packets'
import type { KeepPlan, KeptSpan } from './keep-plan'
import { KEY_GAP_MAX_S, OUTPUT_TIME_BASE } from './keep-plan'
import { findExactRun } from './packet-run'
import type { PacketTime } from './packet-run'
import { LONGEST_SIDE_MAX_PX } from './picture-size'

/**
 * The packets to copy for a clip that is as it should be already: H.264 that every browser shows, a key frame every tenth of
 * a second, upright and small enough, and cut where key frames are. Copying loses nothing and takes no time.
 *
 * @returns undefined when it must be made anew
 */
export function findFitRuns({ facts, packets }: { facts: ClipFacts, packets: readonly PacketTime[] }, plan: KeepPlan): { runs: CopiedRun[], bytes: number } | undefined {
  if (!isFit(facts)) return undefined
  const newS = new Map(plan.frames.map(frame => [Math.round(frame.oldS * facts.timeBase), frame.newS]))
  const runs = plan.spans.flatMap((span): CopiedRun[] => {
    const run = findExactRun(packets, ticksOf(span, facts))
    return run ? [{ ...run, newTimeS: tick => newS.get(tick) ?? 0 }] : []
  })
  const bytes = runs.reduce((sum, { from, to }) => sum + bytesOf(packets.slice(from, to)), 0)
  return runs.length === plan.spans.length && bytes < FILM_MAX_BYTES ? { runs, bytes } : undefined
}

function isFit(facts: ClipFacts): boolean {
  return facts.codec === 'avc' && isShownByBrowsers(facts)
    && facts.rotationDeg === 0 && !facts.isMirrored && facts.hasSquarePixels && !facts.isHighDynamicRange
    && Math.max(facts.widthPx, facts.heightPx) <= LONGEST_SIDE_MAX_PX
    && facts.longestKeyGapS <= KEY_GAP_MAX_S + 1 / OUTPUT_TIME_BASE
}

function ticksOf({ fromFrame, toFrame }: KeptSpan, { frameTicks }: ClipFacts): { firstTick: number, lastTick: number } {
  return { firstTick: frameTicks[fromFrame] ?? 0, lastTick: frameTicks[toFrame - 1] ?? 0 }
}

function bytesOf(packets: readonly PacketTime[]): number {
  return packets.reduce((sum, { bytes }) => sum + bytes, 0)
}
