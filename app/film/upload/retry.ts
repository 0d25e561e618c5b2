/** What to do after a part or a question did not arrive. */

export type PartFailure
  = { kind: 'network' }
    | { kind: 'status', status: number }

export type NextStep
  /** The same once more. */
  = { step: 'again', waitMs: number }
    /** Ask what the store has, and for a fresh address if it lacks the part. */
    | { step: 'ask-store', waitMs: number }
    | { step: 'give-up', reason: 'gone' | 'refused' }

export const FIRST_WAIT_MS = 1_000
export const LONGEST_WAIT_MS = 30_000
/** An address may expire while a part waits its turn; one that is refused again at once will go on being refused. */
export const REFUSALS_MAX_COUNT = 4

/** How one part has fared, this time included. */
export interface Failures {
  /** From 1. */
  failedCount: number
  /** How many of those were refusals of the store (403, 400). */
  refusedCount: number
}

/**
 * Decides the next step for one part. A bad line never ends a film: it is tried for as long as the page lives, ever more seldom.
 * @param failure what came back
 * @param randomShare 0 to 1; spreads the waits of several parts so that they do not all come at once
 */
export function decideNextStep(failure: PartFailure, { failedCount, refusedCount }: Failures, randomShare: number): NextStep {
  const waitMs = backOffMs(failedCount, randomShare)
  // The part may have arrived and only its answer be lost: asking costs a line, sending again costs the part.
  if (failure.kind === 'network') return { step: 'ask-store', waitMs }
  if (failure.status === 404) return { step: 'give-up', reason: 'gone' }
  if (isPassing(failure.status)) return { step: 'again', waitMs }
  // 403 is what a store says to an address that has run out, 400 to one that was cut short on the way.
  if (isRefusal(failure)) {
    return refusedCount >= REFUSALS_MAX_COUNT ? { step: 'give-up', reason: 'refused' } : { step: 'ask-store', waitMs }
  }
  return { step: 'give-up', reason: 'refused' }
}

/** Doubles from 1 s to 30 s; half of each wait is spread by `randomShare`. */
export function backOffMs(failedCount: number, randomShare: number): number {
  const doubled = FIRST_WAIT_MS * 2 ** Math.max(0, failedCount - 1)
  const longest = Math.min(doubled, LONGEST_WAIT_MS)
  return Math.round(longest / 2 + (longest / 2) * Math.min(1, Math.max(0, randomShare)))
}

/** True for what a store says to an address that is no good: an address may expire, so a fresh one is worth a try. */
export function isRefusal(failure: PartFailure): boolean {
  return failure.kind === 'status' && (failure.status === 403 || failure.status === 400)
}

/** True for an answer that the next try may not get. */
export function isPassing(status: number): boolean {
  return status >= 500 || status === 408 || status === 429
}
