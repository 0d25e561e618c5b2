/** What to do after a part did not arrive. */

export type PartFailure
  = { kind: 'network' }
    | { kind: 'status', status: number }

export type NextStep
  = { step: 'again', waitMs: number }
    | { step: 'fresh-address', waitMs: number }
    | { step: 'give-up', reason: 'gone' | 'refused' | 'unreachable' }

export const FIRST_WAIT_MS = 1_000
export const LONGEST_WAIT_MS = 30_000
/** With the waits above about five minutes of trying, which bridges a tunnel or a lift. */
export const TRIES_MAX_COUNT = 14
/** An address may expire while a part waits its turn; one that is refused again at once will go on being refused. */
export const REFUSALS_MAX_COUNT = 4

/**
 * Decides the next step for one part.
 * @param failure what came back
 * @param failedCount how often this part has failed, this time included (from 1)
 * @param randomShare 0 to 1; spreads the waits of several parts so that they do not all come at once
 */
export function decideNextStep(failure: PartFailure, failedCount: number, randomShare: number): NextStep {
  const waitMs = backOffMs(failedCount, randomShare)
  if (failure.kind === 'network') return tryAgain(failedCount, waitMs)
  if (failure.status === 404) return { step: 'give-up', reason: 'gone' }
  if (isPassing(failure.status)) return tryAgain(failedCount, waitMs)
  // 403 is what a store says to an address that has run out, 400 to one that was cut short on the way.
  if (failure.status === 403 || failure.status === 400) {
    return failedCount >= REFUSALS_MAX_COUNT ? { step: 'give-up', reason: 'refused' } : { step: 'fresh-address', waitMs }
  }
  return { step: 'give-up', reason: 'refused' }
}

/** Doubles from 1 s to 30 s; half of each wait is spread by `randomShare`. */
export function backOffMs(failedCount: number, randomShare: number): number {
  const doubled = FIRST_WAIT_MS * 2 ** Math.max(0, failedCount - 1)
  const longest = Math.min(doubled, LONGEST_WAIT_MS)
  return Math.round(longest / 2 + (longest / 2) * Math.min(1, Math.max(0, randomShare)))
}

function tryAgain(failedCount: number, waitMs: number): NextStep {
  return failedCount >= TRIES_MAX_COUNT ? { step: 'give-up', reason: 'unreachable' } : { step: 'again', waitMs }
}

function isPassing(status: number): boolean {
  return status >= 500 || status === 408 || status === 429
}
