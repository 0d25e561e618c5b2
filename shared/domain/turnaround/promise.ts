import type { AddingOutcome } from './adding'
import { HORIZON_MS, addWorkingMs } from './adding'
import { workingMsBetween } from './between'
import type { Span, WorkingCalendar } from './calendar'
import { MINUTE_MS } from './zone'

/** How long a promise shown before paying holds. */
export const QUOTE_HOLDS_MS = 30 * MINUTE_MS

/** A promise shown before paying. */
export interface Quote {
  promisedAtMs: number
  quotedAtMs: number
}

export interface PromiseRequest {
  calendar: WorkingCalendar
  /** The moment of payment, or of spending a credit. */
  startMs: number
  /** Working time that the offer promises. */
  turnaroundMs: number
  quote?: Quote
}

/**
 * The moment by which the answer is due: `turnaroundMs` of working time after the start, or the quoted moment while the
 * quote holds (30 minutes, half-open). A quote from after the start is no quote. A turnaround of zero is due at once.
 * `no-working-time` and `not-a-duration` as `addWorkingMs` answers them. Throws as `workingSpans` does.
 */
export function promiseFor({ calendar, startMs, turnaroundMs, quote }: PromiseRequest): AddingOutcome {
  if (quote && isQuoteHeld(quote, startMs)) return { ok: true, atMs: quote.promisedAtMs }
  return addWorkingMs(calendar, startMs, turnaroundMs)
}

/** Whether a payment at `atMs` gets the quoted promise: from the moment of the quote until 30 minutes after, half-open. */
export function isQuoteHeld(quote: Quote, atMs: number): boolean {
  return quote.quotedAtMs <= atMs && atMs < quote.quotedAtMs + QUOTE_HOLDS_MS
}

/**
 * A promise after a pause: moved by the pause's working length on the calendar that held when the promise was made, so the
 * time in hand is the same when the clock runs again. A pause that begins after the promise moves nothing: what is
 * missed stays missed. Looks as far beyond the promise as the pause was long, and 400 days more. Throws as `workingSpans` does.
 */
export function promiseAfterPause(calendar: WorkingCalendar, promisedAtMs: number, pause: Span): AddingOutcome {
  if (pause.fromMs > promisedAtMs || pause.toMs <= pause.fromMs) return { ok: true, atMs: promisedAtMs }
  const pausedMs = workingMsBetween(calendar, pause.fromMs, pause.toMs)
  return addWorkingMs(calendar, promisedAtMs, pausedMs, HORIZON_MS + pause.toMs - pause.fromMs)
}
