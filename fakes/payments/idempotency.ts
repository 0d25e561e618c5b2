import { refuse } from './refusals'
import type { State, StoredAnswer } from './store'

const KEPT_MS = 24 * 60 * 60 * 1000
const LONGEST_KEY = 255

export interface KeyedRequest {
  key: string
  method: string
  path: string
  fingerprint: string
}

/**
 * The service's rule for `Idempotency-Key`: the same request gets the first answer again, another request under
 * the same key is refused, and so is one that arrives while the first is being answered. Answers are kept a day.
 */
export class IdempotencyKeys {
  private readonly inFlight = new Set<string>()

  /** The kept answer, or nothing, in which case the key is held until `release`. */
  begin(state: State, request: KeyedRequest, nowMs: number): StoredAnswer | undefined {
    if (request.key.length > LONGEST_KEY) refuse('idempotency-key-long', `Idempotency keys can be up to ${LONGEST_KEY} characters.`)
    if (this.inFlight.has(request.key)) {
      refuse('idempotency-in-flight', `There is currently another in-progress request using this Idempotent Key (${request.key}). Please try again later.`)
    }
    const kept = findKept(state, request.key, nowMs)
    if (kept === undefined) {
      this.inFlight.add(request.key)
      return undefined
    }
    const other = `Try using a key other than '${request.key}' if you meant to execute a different request.`
    if (kept.path !== request.path || kept.method !== request.method) {
      refuse('idempotency-other-path', `Keys for idempotent requests can only be used for the same endpoint they were first used for ('${kept.path}'). ${other}`)
    }
    if (kept.fingerprint !== request.fingerprint) {
      refuse('idempotency-other-parameters', `Keys for idempotent requests can only be used with the same parameters they were first used with. ${other}`)
    }
    return kept
  }

  keep(state: State, request: KeyedRequest, answer: Pick<StoredAnswer, 'status' | 'body' | 'requestId'>, nowMs: number): void {
    const { key, ...where } = request
    state.answers[key] = { ...where, ...answer, atMs: nowMs }
  }

  release(key: string): void {
    this.inFlight.delete(key)
  }
}

// An answer past its day stays in the file until the key is used again; it is never given out.
function findKept(state: State, key: string, nowMs: number): StoredAnswer | undefined {
  const kept = Object.hasOwn(state.answers, key) ? state.answers[key] : undefined
  return kept !== undefined && nowMs - kept.atMs < KEPT_MS ? kept : undefined
}
