import { workingMsBetween } from './between'
import type { CalendarsById, TurnaroundEvent, TurnaroundRefusal, TurnaroundState } from './events'
import { promiseAfterPause } from './promise'

export type Applied = { ok: true, state: TurnaroundState } | { ok: false, reason: TurnaroundRefusal }

export type Replayed
  = | { ok: true, state: TurnaroundState }
    | { ok: false, reason: TurnaroundRefusal | 'no-events', eventIndex: number }

/**
 * The present state from all events of one turnaround, oldest first. Stops at the first event that does not fit and names it
 * by position; no events at all is `no-events`. Calendars that no event names need not be there, so later versions of
 * hours or time off cannot move a promise. Throws as `workingSpans` does.
 */
export function replayTurnaround(events: readonly TurnaroundEvent[], calendars: CalendarsById): Replayed {
  let state: TurnaroundState | null = null
  for (const [eventIndex, event] of events.entries()) {
    const applied = applyTurnaroundEvent(state, event, calendars)
    if (!applied.ok) return { ok: false, reason: applied.reason, eventIndex }
    state = applied.state
  }
  return state ? { ok: true, state } : { ok: false, reason: 'no-events', eventIndex: 0 }
}

/** The state after one more event; `state` is null before the first. The state given is not changed. */
export function applyTurnaroundEvent(state: TurnaroundState | null, event: TurnaroundEvent, calendars: CalendarsById): Applied {
  if (event.kind === 'started') return state ? refused('already-started') : started(event, calendars)
  if (!state) return refused('not-started')
  if (state.status === 'stopped' && event.kind !== 'missed') return refused('already-stopped')
  if (event.atMs < state.asOfMs) return refused('out-of-order')
  const brought = broughtUpTo(state, event.atMs, calendars)
  if (!brought.ok) return brought
  if (event.kind === 'coach-changed') return coachChanged(brought.state, event, calendars)
  if (event.calendarVersionId !== state.calendarVersionId) return refused('calendar-differs')
  if (event.kind === 'resumed') return resumed(brought.state, event, calendars)
  if (event.promisedAtMs !== state.promisedAtMs) return refused('promise-differs')
  if (event.kind === 'paused') return paused(brought.state, event)
  if (event.kind === 'missed') return missed(brought.state, event)
  return stopped(brought.state, event)
}

/** Working time used until `nowMs`, pauses left out; `nowMs` before the last event counts as that event. `unknown-calendar` is null. */
export function usedMsAt(state: TurnaroundState, calendars: CalendarsById, nowMs: number): number | null {
  const brought = broughtUpTo(state, Math.max(nowMs, state.asOfMs), calendars)
  return brought.ok ? brought.state.usedMs : null
}

/**
 * Whether the promise is broken at `nowMs`: the clock ran past it. An answer at the very millisecond promised is in time.
 * A clock that stands still cannot become late; one that stopped is judged by the moment it stopped.
 */
export function isLateAt(state: TurnaroundState, nowMs: number): boolean {
  return (state.ranUntilMs ?? nowMs) > state.promisedAtMs
}

function refused(reason: TurnaroundRefusal): { ok: false, reason: TurnaroundRefusal } {
  return { ok: false, reason }
}

function broughtUpTo(state: TurnaroundState, atMs: number, calendars: CalendarsById): Applied {
  const calendar = calendars.get(state.calendarVersionId)
  if (!calendar) return refused('unknown-calendar')
  const usedMs = state.status === 'running' ? state.usedMs + workingMsBetween(calendar, state.asOfMs, atMs) : state.usedMs
  return { ok: true, state: { ...state, usedMs, asOfMs: atMs } }
}

function started(event: TurnaroundEvent, calendars: CalendarsById): Applied {
  const calendar = calendars.get(event.calendarVersionId)
  if (!calendar) return refused('unknown-calendar')
  if (event.promisedAtMs < event.atMs) return refused('promise-before-start')
  return {
    ok: true,
    state: {
      status: 'running',
      startedAtMs: event.atMs,
      calendarVersionId: event.calendarVersionId,
      promisedAtMs: event.promisedAtMs,
      allowedMs: workingMsBetween(calendar, event.atMs, event.promisedAtMs),
      usedMs: 0,
      asOfMs: event.atMs,
      ranUntilMs: null,
      pauses: [],
      stoppedAtMs: null,
      missedAtMs: null,
    },
  }
}

function paused(state: TurnaroundState, { atMs }: TurnaroundEvent): Applied {
  if (state.status !== 'running') return refused('not-running')
  return { ok: true, state: { ...state, status: 'paused', ranUntilMs: atMs, pauses: [...state.pauses, { fromMs: atMs, toMs: null }] } }
}

function resumed(state: TurnaroundState, event: TurnaroundEvent, calendars: CalendarsById): Applied {
  const outcome = resumedPromise(state, event.atMs, calendars)
  if (!outcome.ok) return outcome
  if (outcome.atMs !== event.promisedAtMs) return refused('promise-differs')
  return {
    ok: true,
    state: { ...state, status: 'running', promisedAtMs: outcome.atMs, ranUntilMs: null, pauses: endedPauses(state, event.atMs) },
  }
}

/** The promise when a paused turnaround runs again at `atMs`. */
export function resumedPromise(
  state: TurnaroundState, atMs: number, calendars: CalendarsById,
): { ok: true, atMs: number } | { ok: false, reason: TurnaroundRefusal } {
  const pause = state.pauses.at(-1)
  if (state.status !== 'paused' || !pause) return refused('not-paused')
  const calendar = calendars.get(state.calendarVersionId)
  if (!calendar) return refused('unknown-calendar')
  return promiseAfterPause(calendar, state.promisedAtMs, { fromMs: pause.fromMs, toMs: atMs })
}

function stopped(state: TurnaroundState, { atMs }: TurnaroundEvent): Applied {
  return {
    ok: true,
    state: { ...state, status: 'stopped', stoppedAtMs: atMs, ranUntilMs: state.ranUntilMs ?? atMs, pauses: endedPauses(state, atMs) },
  }
}

/** Also after the stop: a sweep that comes late must still be able to say that the answer was. */
function missed(state: TurnaroundState, { atMs }: TurnaroundEvent): Applied {
  if (state.missedAtMs !== null) return refused('already-missed')
  if (!isLateAt(state, atMs)) return refused('not-late')
  return { ok: true, state: { ...state, missedAtMs: atMs } }
}

function coachChanged(state: TurnaroundState, event: TurnaroundEvent, calendars: CalendarsById): Applied {
  const { atMs, calendarVersionId, promisedAtMs } = event
  const calendar = calendars.get(calendarVersionId)
  if (!calendar) return refused('unknown-calendar')
  const isSamePromise = promisedAtMs === state.promisedAtMs && calendarVersionId === state.calendarVersionId
  if (isSamePromise) return { ok: true, state }
  if (promisedAtMs < atMs) return refused('promise-before-start')
  // A new promise would hide the broken one, and with it the remedy that the student is owed.
  if (state.missedAtMs === null && isLateAt(state, atMs)) return refused('miss-not-recorded')
  const allowedMs = state.usedMs + workingMsBetween(calendar, atMs, promisedAtMs)
  const next = { ...state, calendarVersionId, promisedAtMs, allowedMs }
  if (state.status !== 'paused') return { ok: true, state: next }
  return { ok: true, state: { ...next, ranUntilMs: atMs, pauses: [...endedPauses(state, atMs), { fromMs: atMs, toMs: null }] } }
}

function endedPauses(state: TurnaroundState, atMs: number): TurnaroundState['pauses'] {
  return state.pauses.map(pause => pause.toMs === null ? { fromMs: pause.fromMs, toMs: atMs } : pause)
}
