import type { WorkingCalendar } from './calendar'
import { workingSpans } from './spans'
import { epochDayAt, wallInstantMs } from './zone'

export interface WorkingToday {
  opensAtMs: number
  /** End of the last working hour of the local date; it may have passed. */
  closesAtMs: number
  /** Working time from now to the end of the local date. */
  leftMs: number
}

/**
 * The working hours of the date that it is now in the calendar's zone, from midnight to midnight there (23 or 25 hours when
 * clocks change). Null on a date without working time. Throws as `workingSpans` does.
 */
export function workingToday(calendar: WorkingCalendar, nowMs: number): WorkingToday | null {
  const epochDay = epochDayAt(calendar.timeZone, nowMs)
  const midnightMs = wallInstantMs(calendar.timeZone, epochDay, 0)
  const spans = workingSpans(calendar, midnightMs, wallInstantMs(calendar.timeZone, epochDay + 1, 0))
  const first = spans.at(0)
  const last = spans.at(-1)
  if (!first || !last) return null
  const leftMs = spans.reduce((sum, span) => sum + Math.max(0, span.toMs - Math.max(span.fromMs, nowMs)), 0)
  return { opensAtMs: first.fromMs, closesAtMs: last.toMs, leftMs }
}
