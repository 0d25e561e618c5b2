import type { WorkingCalendar } from './calendar'
import { workingSpans } from './spans'

/**
 * Working milliseconds from one instant to another. Signed: when `toMs` is earlier, minus the working time between them,
 * so that `between(a, b) + between(b, c) = between(a, c)` in any order. Never -0. Equal instants and a calendar without
 * hours give 0. Throws as `workingSpans` does.
 */
export function workingMsBetween(calendar: WorkingCalendar, fromMs: number, toMs: number): number {
  if (toMs < fromMs) return 0 - workingMsBetween(calendar, toMs, fromMs)
  return workingSpans(calendar, fromMs, toMs).reduce((sum, span) => sum + (span.toMs - span.fromMs), 0)
}

/**
 * Working milliseconds left until the promise; negative when it has passed, by the working time since. 0 between the last
 * working moment before a promise and the first after it. Throws as `workingSpans` does.
 */
export function timeInHandMs(calendar: WorkingCalendar, nowMs: number, promisedAtMs: number): number {
  return workingMsBetween(calendar, nowMs, promisedAtMs)
}
