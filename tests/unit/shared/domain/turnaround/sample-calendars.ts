import type { Span, WorkingCalendar } from '#shared/domain/turnaround/calendar'

export const HOUR_MS = 3_600_000

/** Instant of a UTC text such as `2026-05-12T09:00Z`. */
export function at(text: string): number {
  const ms = Date.parse(text)
  if (Number.isNaN(ms)) throw new Error(`not an instant: ${text}`)
  return ms
}

export function span(from: string, to: string): Span {
  return { fromMs: at(from), toMs: at(to) }
}

/** Monday to Friday, whole hours on the wall clock. */
export function weekdays(timeZone: string, fromHour: number, toHour: number, timeOff: Span[] = []): WorkingCalendar {
  return {
    timeZone,
    weekly: [1, 2, 3, 4, 5].map(weekday => ({ weekday, fromMinute: fromHour * 60, toMinute: toHour * 60 })),
    timeOff,
  }
}

/** Every minute of every day. */
export function always(timeZone: string): WorkingCalendar {
  return {
    timeZone,
    weekly: [1, 2, 3, 4, 5, 6, 7].map(weekday => ({ weekday, fromMinute: 0, toMinute: 1440 })),
    timeOff: [],
  }
}

/** One weekday's span in wall minutes. */
export function once(timeZone: string, weekday: number, fromMinute: number, toMinute: number): WorkingCalendar {
  return { timeZone, weekly: [{ weekday, fromMinute, toMinute }], timeOff: [] }
}
