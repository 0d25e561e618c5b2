import { timeInHandMs } from '#shared/domain/turnaround/between'
import type { TurnaroundEvent } from '#shared/domain/turnaround/events'
import { startTurnaround, stopTurnaround } from '#shared/domain/turnaround/moves'
import type { Quote } from '#shared/domain/turnaround/promise'
import { replayTurnaround } from '#shared/domain/turnaround/replay'
import type { Ctx } from '#server/context'
import type { Database } from '#server/database/client'
import { newId } from '#server/ids'
import { getCalendarFor, getCalendarsById } from './calendars'
import type { TurnaroundEventRow, TurnaroundRow } from './turnaround.repository'
import { findTurnaround, insertTurnaround, insertTurnaroundEvent, listTurnaroundEvents, updateTurnaround } from './turnaround.repository'
import { noPromisePossible } from './turnaround.errors'

/** Starts the clock of an answer, by the hours of the chosen coach or of the studio. @returns the promise. */
export async function beginAnswerClock(
  db: Database, ctx: Ctx, input: { reviewId: string, chosenCoachId: string | null, turnaroundMs: number, atMs?: number, quote?: Quote },
): Promise<number> {
  const { id: calendarId, calendar } = await getCalendarFor(db, input.chosenCoachId)
  const { atMs = ctx.nowMs } = input
  const outcome = startTurnaround(
    { atMs, calendarVersionId: calendarId, turnaroundMs: input.turnaroundMs, quote: input.quote },
    new Map([[calendarId, calendar]]),
  )
  if (!outcome.ok) throw noPromisePossible()
  const id = newId(ctx.nowMs)
  await insertTurnaround(db, {
    id,
    review_id: input.reviewId,
    kind: 'answer',
    sequence: 1,
    status: 'running',
    calendar_id: calendarId,
    turnaround_ms: input.turnaroundMs,
    started_at_ms: atMs,
    promised_at_ms: outcome.event.promisedAtMs,
    stopped_at_ms: null,
  })
  await addEvent(db, ctx, id, outcome.event)
  return outcome.event.promisedAtMs
}

/** Stops the clock of a review's answer. @throws when the stored events do not allow it: a fault of ours. */
export async function stopAnswerClock(db: Database, ctx: Ctx, reviewId: string): Promise<void> {
  const turnaround = await findTurnaround(db, reviewId, 'answer')
  if (!turnaround) throw new Error(`Review ${reviewId} has no answer turnaround.`)
  const rows = await listTurnaroundEvents(db, [turnaround.id])
  const calendars = await getCalendarsById(db, rows.map(row => row.calendar_id))
  const replayed = replayTurnaround(rows.map(toEvent), calendars)
  const outcome = replayed.ok ? stopTurnaround(replayed.state, ctx.nowMs, calendars) : replayed
  if (!outcome.ok) throw new Error(`The clock of turnaround ${turnaround.id} cannot stop: ${outcome.reason}.`)
  await updateTurnaround(db, turnaround.id, {
    status: 'stopped',
    promised_at_ms: outcome.state.promisedAtMs,
    calendar_id: outcome.state.calendarVersionId,
    stopped_at_ms: ctx.nowMs,
  })
  await addEvent(db, ctx, turnaround.id, outcome.event)
}

/** Working time left to a promise; what it was when the clock was stopped for new film, and null after the answer. */
export async function readTimeInHandMs(db: Database, row: TurnaroundRow, nowMs: number): Promise<number | null> {
  if (row.status === 'stopped') return null
  const calendar = (await getCalendarsById(db, [row.calendar_id])).get(row.calendar_id)
  if (!calendar) throw new Error(`Turnaround ${row.id} names a calendar that is not there.`)
  if (row.status === 'running') return timeInHandMs(calendar, nowMs, row.promised_at_ms)
  const lastPause = (await listTurnaroundEvents(db, [row.id])).findLast(event => event.kind === 'paused')
  return timeInHandMs(calendar, lastPause?.at_ms ?? nowMs, row.promised_at_ms)
}

export function toEvent(row: TurnaroundEventRow): TurnaroundEvent {
  return { kind: row.kind, atMs: row.at_ms, calendarVersionId: row.calendar_id, promisedAtMs: row.promised_at_ms }
}

async function addEvent(db: Database, ctx: Ctx, turnaroundId: string, event: TurnaroundEvent): Promise<void> {
  await insertTurnaroundEvent(db, {
    id: newId(ctx.nowMs),
    turnaround_id: turnaroundId,
    kind: event.kind,
    at_ms: event.atMs,
    calendar_id: event.calendarVersionId,
    promised_at_ms: event.promisedAtMs,
    actor_id: ctx.viewer?.id ?? null,
  })
}
