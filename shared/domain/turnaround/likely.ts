import type { AddingOutcome } from './adding'
import { addWorkingMs } from './adding'
import type { WorkingCalendar } from './calendar'

/** A review that waits for, or lies before, one coach. */
export interface QueuedWork {
  promisedAtMs: number
  /** Working time it will take: the coach's median review time, or what is left of it. */
  workMs: number
  /** Already begun, so finished first whatever the promises say. */
  isInHand?: boolean
}

export interface LikelyRequest {
  calendar: WorkingCalendar
  nowMs: number
  queue: readonly QueuedWork[]
  /** The promise that the new review would get. */
  promisedAtMs: number
  /** The coach's median review time; a fraction of a millisecond is rounded up. */
  workMs: number
}

export type LikelyOutcome
  = | { ok: true, likelyAtMs: number, isInTime: boolean }
    | Exclude<AddingOutcome, { ok: true }>

/**
 * When a new review would likely be answered: the queue worked in order of promise through the coach's hours, the new one
 * after those promised no later than it. `isInTime` is false when that lies after its promise, and then it is not sold.
 *
 * An estimate: reviews bought afterwards with an earlier promise go ahead of it. Earliest due date first makes the
 * greatest lateness least for one worker with all work at hand (Jackson 1955); it does not make the fewest late.
 * An empty queue leaves the review's own time. Outcomes and errors as `addWorkingMs`.
 */
export function likelyAt({ calendar, nowMs, queue, promisedAtMs, workMs }: LikelyRequest): LikelyOutcome {
  const aheadMs = queue
    .filter(work => work.isInHand === true || work.promisedAtMs <= promisedAtMs)
    .reduce((sum, work) => sum + Math.ceil(work.workMs), 0)
  const outcome = addWorkingMs(calendar, nowMs, aheadMs + Math.ceil(workMs))
  if (!outcome.ok) return outcome
  return { ok: true, likelyAtMs: outcome.atMs, isInTime: outcome.atMs <= promisedAtMs }
}

/** In order of promise, work in hand first; equal promises keep the order given. The list given is not changed. */
export function inOrderOfPromise<Work extends QueuedWork>(queue: readonly Work[]): Work[] {
  return [...queue].sort((a, b) => Number(b.isInHand === true) - Number(a.isInHand === true) || a.promisedAtMs - b.promisedAtMs)
}

/**
 * When each review of a queue would be finished, in the order worked. `finishAtMs` is null from the first one that the
 * horizon of `addWorkingMs` no longer holds (or whose `workMs` is negative or not a number). An empty queue gives `[]`.
 */
export function queueFinishes<Work extends QueuedWork>(
  calendar: WorkingCalendar, nowMs: number, queue: readonly Work[],
): { work: Work, finishAtMs: number | null }[] {
  let atMs: number | null = nowMs
  return inOrderOfPromise(queue).map((work) => {
    const outcome: AddingOutcome | null = atMs === null ? null : addWorkingMs(calendar, atMs, Math.ceil(work.workMs))
    atMs = outcome?.ok ? outcome.atMs : null
    return { work, finishAtMs: atMs }
  })
}
