import type { WorkingCalendar } from './calendar'

export const TURNAROUND_EVENT_KINDS = ['started', 'paused', 'resumed', 'stopped', 'missed', 'coach-changed'] as const
export type TurnaroundEventKind = typeof TURNAROUND_EVENT_KINDS[number]

/**
 * What happened to a turnaround; only ever added. `started` and `coach-changed` make a promise and are believed;
 * every other kind must carry the promise that replaying arrives at.
 */
export interface TurnaroundEvent {
  kind: TurnaroundEventKind
  atMs: number
  /** The calendar on which the promise was made. */
  calendarVersionId: string
  /** The promise that resulted. */
  promisedAtMs: number
}

/** Versions of calendars by their id; versions are never changed, only added. */
export type CalendarsById = ReadonlyMap<string, WorkingCalendar>

export interface TurnaroundPause {
  fromMs: number
  /** Null while it lasts. */
  toMs: number | null
}

export interface TurnaroundState {
  status: 'running' | 'paused' | 'stopped'
  startedAtMs: number
  /** The calendar on which the present promise was made; pauses are measured on it. */
  calendarVersionId: string
  promisedAtMs: number
  /** Working time from the start to the promise, pauses left out. */
  allowedMs: number
  /** Working time used until `asOfMs`, pauses left out. */
  usedMs: number
  /** The moment of the last event. */
  asOfMs: number
  /** When the clock last ran: the beginning of the pause that lasts, or the stop; null while it runs. */
  ranUntilMs: number | null
  /** In order. A new promise during a pause splits it, since only what follows moves the new promise. */
  pauses: readonly TurnaroundPause[]
  stoppedAtMs: number | null
  missedAtMs: number | null
}

/** Why an event does not fit. */
export type TurnaroundRefusal
  = 'not-started' | 'already-started' | 'not-running' | 'not-paused' | 'already-stopped' | 'already-missed' | 'not-late' | 'miss-not-recorded'
    | 'out-of-order' | 'unknown-calendar' | 'calendar-differs' | 'promise-differs' | 'promise-before-start'
    | 'no-working-time' | 'not-a-duration'
