import { addWorkingMs } from './adding'
import { workingMsBetween } from './between'
import type { WorkingCalendar } from './calendar'
import type { CalendarsById, TurnaroundState } from './events'

export interface WarningMoments {
  /** When half of the whole working time is left; null when it was already less. */
  halfAtMs: number | null
  /** When a fifth is left; null when it was already less. */
  fifthAtMs: number | null
}

export interface WarningRequest {
  calendar: WorkingCalendar
  /** Since when the clock has run without a break. */
  runningSinceMs: number
  promisedAtMs: number
  /** Working time of the whole turnaround, pauses left out. */
  allowedMs: number
}

/**
 * The moments at which a coach is warned: when the working time left falls to half and to a fifth of the whole (rounded down
 * to a millisecond). A share that was already passed when the clock began to run is null: its warning belongs to the earlier run.
 * Nothing to work with (`allowedMs` 0 or less, or the promise in the past) gives two nulls. Throws as `workingSpans` does.
 */
export function warningMoments({ calendar, runningSinceMs, promisedAtMs, allowedMs }: WarningRequest): WarningMoments {
  const leftMs = workingMsBetween(calendar, runningSinceMs, promisedAtMs)
  const momentOf = (shareMs: number): number | null => {
    if (allowedMs <= 0 || leftMs <= 0 || shareMs > leftMs) return null
    const outcome = addWorkingMs(calendar, runningSinceMs, leftMs - shareMs, promisedAtMs - runningSinceMs)
    return outcome.ok ? outcome.atMs : null
  }
  return { halfAtMs: momentOf(Math.floor(allowedMs / 2)), fifthAtMs: momentOf(Math.floor(allowedMs / 5)) }
}

/** The moments still to come for a turnaround as replayed; two nulls while it stands still, once it stopped, or without its calendar. */
export function warningMomentsOf(state: TurnaroundState, calendars: CalendarsById): WarningMoments {
  const calendar = calendars.get(state.calendarVersionId)
  if (!calendar || state.status !== 'running') return { halfAtMs: null, fifthAtMs: null }
  return warningMoments({ calendar, runningSinceMs: state.asOfMs, promisedAtMs: state.promisedAtMs, allowedMs: state.allowedMs })
}
