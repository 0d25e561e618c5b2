import { judgeFilm } from '#shared/domain/film/judge'
import { FILM_MAX_BYTES, FILM_MAX_DURATION_MS } from '#shared/domain/film/limits'
import { asItWas } from './as-it-was'
import type { SpanS } from './clip-facts'
import { ClipProblem } from './clip-problem'
import type { CopiedRun } from './copy-packets'
import { copyPackets } from './copy-packets'
import { findFitRuns } from './fit-runs'
import type { KeepPlan } from './keep-plan'
import { lengthOf, planKeep } from './keep-plan'
import { findWholeRun } from './packet-run'
import type { PreparedBytes, PrepareWay } from './prepared-clip'
import type { PreparedFile } from './prepared-file'
import { createPreparedFile } from './prepared-file'
import type { ReadClip } from './read-clip'
import { readClip } from './read-clip'
import { reEncode } from './re-encode'
import type { Watch } from './worker-message'

/** One way of making the film ready, with all that it needs. */
interface Rung {
  way: Exclude<PrepareWay, 'untouched'>
  plan: KeepPlan
  expectedBytes: number
  write(into: PreparedFile): Promise<void>
}

/**
 * Makes a clip ready for sending, on the best rung of the ladder that this browser can stand on.
 *
 * A rung that fails is left for the next, since decoders fail in the middle of films that they said they could decode; the
 * last is the clip as it was.
 *
 * @param keep spans in the clip's own seconds; empty keeps everything
 * @throws ClipProblem for a clip that cannot be read, spans without frames, or more than a minute kept
 */
export async function prepareFilm(file: Blob, keep: readonly SpanS[], watch: Watch): Promise<PreparedBytes> {
  const clip = await readClip(file)
  try {
    const { facts } = clip
    const plan = planKeep(facts.frameTimesS, keep, endOf(clip))
    if (plan.frames.length < 2) throw new ClipProblem('no-frames')
    if (lengthOf(plan) * 1000 > FILM_MAX_DURATION_MS) throw new ClipProblem('too-long')
    const setbacks: string[] = []
    for (const rung of rungsFor(clip, plan, keep, watch)) {
      const made = await tryRung(rung, watch)
      if ('bytes' in made) return { ...made, ...shapeOf(rung.plan), way: rung.way, captureFramesPerSecond: facts.captureFramesPerSecond, reason: undefined, setbacks }
      setbacks.push(`${rung.way}: ${made.setback}`)
    }
    return { bytes: file, ...asItWas(facts, keep, setbacks) }
  }
  finally {
    clip.input.dispose()
  }
}

function* rungsFor(clip: ReadClip, plan: KeepPlan, keep: readonly SpanS[], watch: Watch): Generator<Rung> {
  const { facts } = clip
  const fit = findFitRuns(clip, plan)
  if (fit) yield { way: 'cut-and-stripped', plan, expectedBytes: fit.bytes, write: into => copyPackets(clip, fit.runs, into, watch) }
  const { encoder } = facts
  if (facts.canDecode && encoder) {
    // At first as the browser likes; then without the hardware, whose decoders give up on large pictures on some phones.
    for (const hardware of ['no-preference', 'prefer-software'] as const)
      yield { way: 're-encoded', plan, expectedBytes: Math.min(facts.bytes * 3, FILM_MAX_BYTES), write: into => reEncode({ clip, plan, encoder, hardware }, into, watch) }
  }
  if (judgeFilm({ ...facts, hasSound: false, hasLocation: false }) === undefined) {
    const run: CopiedRun = { ...findWholeRun(clip.packets, facts.frameTicks), newTimeS: tick => (tick - (facts.frameTicks[0] ?? 0)) / facts.timeBase }
    yield { way: 'remuxed', plan: wholePlan(clip, keep), expectedBytes: facts.bytes, write: into => copyPackets(clip, [run], into, watch) }
  }
}

async function tryRung(rung: Rung, watch: Watch): Promise<Pick<PreparedBytes, 'bytes' | 'keptAs'> | { setback: string }> {
  watch.signal.throwIfAborted()
  const into = await createPreparedFile(rung.expectedBytes)
  try {
    await rung.write(into)
    return await into.close()
  }
  catch (error) {
    await into.discard()
    watch.signal.throwIfAborted()
    return { setback: error instanceof Error ? error.message : String(error) }
  }
}

/** Everything stays, from the first frame at 0; the swings asked for lie where they lay. */
function wholePlan(clip: ReadClip, keep: readonly SpanS[]): KeepPlan {
  const { frameTimesS } = clip.facts
  const whole = planKeep(frameTimesS, [], endOf(clip))
  const firstS = frameTimesS[0] ?? 0
  const endS = lengthOf(whole)
  const swings = keep
    .map(([fromS, toS]): SpanS => [Math.max(0, fromS - firstS), Math.min(endS, toS - firstS)])
    .filter(([fromS, toS]) => toS > fromS)
    .sort((a, b) => a[0] - b[0])
  return { ...whole, swings: keep.length === 0 ? whole.swings : swings }
}

function shapeOf(plan: KeepPlan): Pick<PreparedBytes, 'frames' | 'spans' | 'swings'> {
  return { frames: plan.frames.length, spans: plan.spans, swings: plan.swings }
}

function endOf({ facts }: ReadClip): number {
  return (facts.frameTimesS[0] ?? 0) + facts.durationMs / 1000
}
