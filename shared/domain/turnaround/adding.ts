import type { WorkingCalendar } from './calendar'
import { workingSpans } from './spans'
import { DAY_MS } from './zone'

/** How far ahead working time is looked for: a year, and a long holiday after it. */
export const HORIZON_MS = 400 * DAY_MS

/** Looked through piece by piece, since most answers lie within days and the whole horizon is 400 of them. */
const PIECE_MS = 14 * DAY_MS

export type AddingOutcome
  = | { ok: true, atMs: number }
    /** `not-a-duration`: negative or not whole milliseconds. `no-working-time`: the horizon holds less than was asked for. */
    | { ok: false, reason: 'not-a-duration' | 'no-working-time' }

/**
 * The earliest instant by which `ms` of working time have passed since `startMs`. Eight hours from nine o'clock end at
 * seventeen o'clock, not at nine the next day. Zero is `startMs` itself, working hour or not.
 *
 * `workingMsBetween(calendar, startMs, answer) = ms` always. Looks `horizonMs` ahead (400 days when left out) and answers
 * `no-working-time` beyond it, so a calendar without hours ends too. Throws as `workingSpans` does.
 */
export function addWorkingMs(calendar: WorkingCalendar, startMs: number, ms: number, horizonMs = HORIZON_MS): AddingOutcome {
  if (!Number.isSafeInteger(ms) || ms < 0) return { ok: false, reason: 'not-a-duration' }
  if (ms === 0) return { ok: true, atMs: startMs }
  const endMs = startMs + horizonMs
  let leftMs = ms
  for (let pieceMs = startMs; pieceMs < endMs; pieceMs += PIECE_MS) {
    for (const span of workingSpans(calendar, pieceMs, Math.min(pieceMs + PIECE_MS, endMs))) {
      const lengthMs = span.toMs - span.fromMs
      if (lengthMs >= leftMs) return { ok: true, atMs: span.fromMs + leftMs }
      leftMs -= lengthMs
    }
  }
  return { ok: false, reason: 'no-working-time' }
}
