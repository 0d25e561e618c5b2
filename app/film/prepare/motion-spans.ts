import type { SpanS } from './clip-facts'

/** How much of the picture changed since the sample before. */
export interface MotionSample {
  timeS: number
  /** Mean change of brightness over the picture, 0 to 1. */
  amount: number
}

export interface MotionOptions {
  /** Of the clip, in seconds as it plays. */
  startS: number
  endS: number
  /** How many times slower than life the clip plays; at least 1. */
  slowedBy?: number
  maxSwings?: number
}

/** A clip holds at most six swings (product rule). */
export const SWINGS_MAX = 6
/** From takeaway to the fastest moment is about a second, from there to a held finish as well. */
const BEFORE_PEAK_S = 1.5
const AFTER_PEAK_S = 1.5
/** The quick part of a swing is over sooner; whoever walks through the picture takes longer. */
const BURST_MAX_S = 1.8
/** Bursts nearer than this are one: the way back and the way down. */
const SAME_BURST_S = 0.4
/** Share of a clip that is still, at the least: what moves then is a tree or the camera. */
const QUIET_SHARE = 0.2
/** The largest motion must be this much over the quiet of the clip, and this many times it, or nothing stands out. */
const OVER_QUIET_MIN = 0.001
const TIMES_QUIET_MIN = 2.5
/** A burst lasts while motion is over half of the largest; it is a swing when it reaches this share of it. */
const BURST_SHARE = 0.5
const SWING_SHARE = 0.7
/** Long motion is taken out down to this share of it: its rise and its end would look like bursts of their own. */
const FOOT_SHARE = 0.1
const SAME_FOOT_S = 0.1

interface Burst {
  fromS: number
  toS: number
  /** Its strongest moment, and how strong that is. */
  peakS: number
  amount: number
}

interface Levels {
  foot: number
  burst: number
  swing: number
}

/**
 * Where in a clip swings seem to be: short strong bursts of motion, each with 1.5 s of real time before its strongest
 * moment and after it.
 *
 * Strong is measured against the clip itself, from its quietest fifth to its largest motion, since a waving tree moves all the
 * time. Motion that goes on is no swing and is left out of the measure.
 *
 * @param samples in order of time, at least ten a real second for this to mean anything
 * @returns in order of time, clamped to the clip, those that overlap as one; at most six, the strongest first chosen; empty when nothing stands out
 */
export function findSwingSpans(samples: readonly MotionSample[], { startS, endS, slowedBy = 1, maxSwings = SWINGS_MAX }: MotionOptions): SpanS[] {
  const strongest = findBursts(samples, slowedBy).sort((a, b) => b.amount - a.amount).slice(0, maxSwings)
  return strongest
    .map(({ peakS }): SpanS => [Math.max(startS, peakS - BEFORE_PEAK_S * slowedBy), Math.min(endS, peakS + AFTER_PEAK_S * slowedBy)])
    .sort((a, b) => a[0] - b[0])
    .reduce<SpanS[]>((merged, [fromS, toS]) => {
      const last = merged.at(-1)
      return last && fromS <= last[1] ? [...merged.slice(0, -1), [last[0], Math.max(last[1], toS)]] : [...merged, [fromS, toS]]
    }, [])
}

/** Takes long motion out and measures again, until only short bursts stand out: a walk would hide the swings behind it. */
function findBursts(samples: readonly MotionSample[], slowedBy: number): Burst[] {
  let rest = smoothed(samples)
  for (;;) {
    const levels = findLevels(rest)
    if (!levels) return []
    const bursts = burstsAbove(rest, levels.burst, SAME_BURST_S * slowedBy)
    const long = bursts.filter(({ fromS, toS }) => toS - fromS > BURST_MAX_S * slowedBy)
    if (long.length === 0) return bursts.filter(({ amount }) => amount >= levels.swing)
    const feet = burstsAbove(rest, levels.foot, SAME_FOOT_S * slowedBy).filter(foot => long.some(({ peakS }) => peakS >= foot.fromS && peakS <= foot.toS))
    rest = rest.filter(({ timeS }) => ![...long, ...feet].some(({ fromS, toS }) => timeS >= fromS && timeS <= toS))
  }
}

/** Means of three neighbours: one frame that was stored badly moves all of the picture. */
function smoothed(samples: readonly MotionSample[]): MotionSample[] {
  return samples.map(({ timeS, amount }, index) => {
    const before = samples[index - 1]?.amount ?? amount
    const after = samples[index + 1]?.amount ?? amount
    return { timeS, amount: (before + amount + after) / 3 }
  })
}

function findLevels(samples: readonly MotionSample[]): Levels | undefined {
  const sorted = samples.map(({ amount }) => amount).sort((a, b) => a - b)
  const quiet = sorted[Math.floor(sorted.length * QUIET_SHARE)] ?? 0
  const over = (sorted.at(-1) ?? 0) - quiet
  if (over < OVER_QUIET_MIN || over + quiet < quiet * TIMES_QUIET_MIN) return undefined
  return { foot: quiet + FOOT_SHARE * over, burst: quiet + BURST_SHARE * over, swing: quiet + SWING_SHARE * over }
}

function burstsAbove(samples: readonly MotionSample[], level: number, sameS: number): Burst[] {
  const bursts: Burst[] = []
  for (const { timeS, amount } of samples) {
    if (amount <= level) continue
    const last = bursts.at(-1)
    if (!last || timeS - last.toS > sameS) bursts.push({ fromS: timeS, toS: timeS, peakS: timeS, amount })
    else Object.assign(last, { toS: timeS }, amount > last.amount ? { peakS: timeS, amount } : {})
  }
  return bursts
}
