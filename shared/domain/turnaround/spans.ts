import type { Span, WorkingCalendar } from './calendar'
import { DAY_MS, wallInstantMs, weekdayOf } from './zone'

/** A century: nothing a studio asks for is longer, and a slip such as seconds for milliseconds must not run for minutes. */
export const LONGEST_RANGE_DAYS = 36_600

/**
 * Working time within `[fromMs, toMs)`: spans in order, half-open, merged where they touch, cut at both ends.
 *
 * The ends of each day's hours are wall times resolved by `wallInstantMs`: hours over a spring gap lose the gap, hours over
 * an autumn repeat last longer, and a span whose end then lies at or before its beginning is dropped. Time off is taken away.
 * Walks days, not minutes. `fromMs >= toMs` and a calendar without hours give `[]`; weekly entries that end before they
 * begin are passed over (`calendarProblems` names them). Throws RangeError for an unknown zone, an instant that is not a
 * finite number, or a range over LONGEST_RANGE_DAYS.
 */
export function workingSpans(calendar: WorkingCalendar, fromMs: number, toMs: number): Span[] {
  if (!Number.isFinite(fromMs) || !Number.isFinite(toMs)) throw new RangeError('A range of working time needs two finite instants.')
  if (fromMs >= toMs) return []
  if (toMs - fromMs > LONGEST_RANGE_DAYS * DAY_MS) throw new RangeError(`A range of working time may span ${LONGEST_RANGE_DAYS} days at most.`)
  const hours: Span[] = []
  // No zone is a whole day from UTC, so a day on either side of the range's UTC dates takes in every local date it touches.
  const lastDay = Math.floor(toMs / DAY_MS) + 1
  for (let epochDay = Math.floor(fromMs / DAY_MS) - 1; epochDay <= lastDay; epochDay += 1) {
    hours.push(...hoursOfDay(calendar, epochDay))
  }
  return withoutSpans(mergedSpans(clippedSpans(hours, fromMs, toMs)), mergedSpans(clippedSpans(calendar.timeOff, fromMs, toMs)))
}

/** The parts of spans within `[fromMs, toMs)`, in the order given; empty ones are left out. */
export function clippedSpans(spans: readonly Span[], fromMs: number, toMs: number): Span[] {
  return spans
    .map(span => ({ fromMs: Math.max(span.fromMs, fromMs), toMs: Math.min(span.toMs, toMs) }))
    .filter(span => span.fromMs < span.toMs)
}

/** Spans in order, those that overlap or touch joined; empty ones are left out. */
export function mergedSpans(spans: readonly Span[]): Span[] {
  const merged: Span[] = []
  const inOrder = spans.filter(span => span.fromMs < span.toMs).sort((a, b) => a.fromMs - b.fromMs)
  for (const span of inOrder) {
    const last = merged.at(-1)
    if (last && span.fromMs <= last.toMs) last.toMs = Math.max(last.toMs, span.toMs)
    else merged.push({ fromMs: span.fromMs, toMs: span.toMs })
  }
  return merged
}

/** What is left of `spans` outside `holes`; both must be merged and in order. */
function withoutSpans(spans: readonly Span[], holes: readonly Span[]): Span[] {
  if (holes.length === 0) return [...spans]
  const left: Span[] = []
  for (const span of spans) {
    let fromMs = span.fromMs
    for (const hole of clippedSpans(holes, span.fromMs, span.toMs)) {
      if (fromMs < hole.fromMs) left.push({ fromMs, toMs: hole.fromMs })
      fromMs = hole.toMs
    }
    if (fromMs < span.toMs) left.push({ fromMs, toMs: span.toMs })
  }
  return left
}

function hoursOfDay({ timeZone, weekly }: WorkingCalendar, epochDay: number): Span[] {
  const weekday = weekdayOf(epochDay)
  return weekly
    .filter(hours => hours.weekday === weekday && hours.fromMinute < hours.toMinute)
    .map(hours => ({
      fromMs: wallInstantMs(timeZone, epochDay, hours.fromMinute),
      toMs: wallInstantMs(timeZone, epochDay, hours.toMinute),
    }))
    .filter(span => span.fromMs < span.toMs)
}
