import type { CalendarsById, TurnaroundEvent, TurnaroundEventKind, TurnaroundRefusal, TurnaroundState } from './events'
import type { Quote } from './promise'
import { promiseFor } from './promise'
import { applyTurnaroundEvent, resumedPromise } from './replay'

/** The event to write, and the state once it is written. */
export type MoveOutcome
  = | { ok: true, event: TurnaroundEvent, state: TurnaroundState }
    | { ok: false, reason: TurnaroundRefusal }

export interface StartRequest {
  /** The moment of payment, or of spending a credit. */
  atMs: number
  calendarVersionId: string
  /** Working time that the offer promises. */
  turnaroundMs: number
  quote?: Quote
}

/** A promise that the student agreed to in place of the present one. */
export interface NewPromise {
  calendarVersionId: string
  promisedAtMs: number
}

/** Starts the clock, with the promise computed or taken from a quote that still holds. Throws as `workingSpans` does, like all moves here. */
export function startTurnaround(request: StartRequest, calendars: CalendarsById): MoveOutcome {
  const { atMs, calendarVersionId, turnaroundMs, quote } = request
  const calendar = calendars.get(calendarVersionId)
  if (!calendar) return { ok: false, reason: 'unknown-calendar' }
  const promise = promiseFor({ calendar, startMs: atMs, turnaroundMs, quote })
  if (!promise.ok) return promise
  return applied(null, { kind: 'started', atMs, calendarVersionId, promisedAtMs: promise.atMs }, calendars)
}

/** The clock stands still: new film is awaited. The promise moves only when it runs again. */
export function pauseTurnaround(state: TurnaroundState, atMs: number, calendars: CalendarsById): MoveOutcome {
  return applied(state, keptPromise(state, 'paused', atMs), calendars)
}

/** The clock runs again, with the promise moved by the pause's working length on the calendar that held when it was made. */
export function resumeTurnaround(state: TurnaroundState, atMs: number, calendars: CalendarsById): MoveOutcome {
  const promise = resumedPromise(state, atMs, calendars)
  // A stopped turnaround and a wrong order are named by the replay, so that both ways of asking give one reason.
  const promisedAtMs = promise.ok ? promise.atMs : state.promisedAtMs
  return applied(state, { ...keptPromise(state, 'resumed', atMs), promisedAtMs }, calendars)
}

/** Answered or withdrawn. A second run (a follow-up, "does not answer my question") is a turnaround of its own. */
export function stopTurnaround(state: TurnaroundState, atMs: number, calendars: CalendarsById): MoveOutcome {
  return applied(state, keptPromise(state, 'stopped', atMs), calendars)
}

/** The promise was broken; once a turnaround, also when it stopped late in the meantime. `not-late` before that. */
export function missTurnaround(state: TurnaroundState, atMs: number, calendars: CalendarsById): MoveOutcome {
  return applied(state, keptPromise(state, 'missed', atMs), calendars)
}

/**
 * Another coach answers. The promise and its calendar stand unless the student agreed to a new one; a promise that was
 * already broken must be recorded as missed before another takes its place (`miss-not-recorded`).
 */
export function changeCoach(state: TurnaroundState, atMs: number, calendars: CalendarsById, newPromise?: NewPromise): MoveOutcome {
  return applied(state, { ...keptPromise(state, 'coach-changed', atMs), ...newPromise }, calendars)
}

function keptPromise(state: TurnaroundState, kind: TurnaroundEventKind, atMs: number): TurnaroundEvent {
  return { kind, atMs, calendarVersionId: state.calendarVersionId, promisedAtMs: state.promisedAtMs }
}

function applied(state: TurnaroundState | null, event: TurnaroundEvent, calendars: CalendarsById): MoveOutcome {
  const outcome = applyTurnaroundEvent(state, event, calendars)
  return outcome.ok ? { ok: true, event, state: outcome.state } : outcome
}
