import type { WorkingCalendar } from '#shared/domain/turnaround/calendar'
import { pauseTurnaround, stopTurnaround } from '#shared/domain/turnaround/moves'
import { replayTurnaround } from '#shared/domain/turnaround/replay'
import { workingSpans } from '#shared/domain/turnaround/spans'
import { DAY_MS } from '#shared/domain/turnaround/zone'
import type { Database } from '#server/database/client'
import { updateReview } from '#server/features/reviews/review.repository'
import { getCalendarsById } from '#server/features/turnaround/calendars'
import { findTurnaround, insertTurnaroundEvent, listTurnaroundEvents, updateTurnaround } from '#server/features/turnaround/turnaround.repository'
import { toEvent } from '#server/features/turnaround/turnaround.service'
import { newId } from '#server/ids'

/**
 * When a clock began that has used `usedMs` of working time by now: so a demo at any hour has the same time in hand.
 * @throws when the calendar holds less than that in the last 30 days.
 */
export function startedWithUsed(calendar: WorkingCalendar, nowMs: number, usedMs: number): number {
  let leftMs = usedMs
  for (const span of workingSpans(calendar, nowMs - 30 * DAY_MS, nowMs).reverse()) {
    const lengthMs = span.toMs - span.fromMs
    if (lengthMs >= leftMs) return span.toMs - leftMs
    leftMs -= lengthMs
  }
  throw new RangeError('The demo has no such working time behind it.')
}

/** A waiting review whose student was asked for new film: its clock stands still. */
export async function askedForFilm(db: Database, reviewId: string, atMs: number): Promise<void> {
  await moveClock(db, reviewId, atMs, 'paused')
  await updateReview(db, reviewId, 'waiting', { state: 'new_film', film_asked_count: 1, state_before_new_film: 'waiting' })
}

/** A waiting review that its student took back. */
export async function withdrawn(db: Database, reviewId: string, atMs: number): Promise<void> {
  await moveClock(db, reviewId, atMs, 'stopped')
  await updateReview(db, reviewId, 'waiting', { state: 'withdrawn', closed_at_ms: atMs })
}

async function moveClock(db: Database, reviewId: string, atMs: number, status: 'paused' | 'stopped'): Promise<void> {
  const turnaround = await findTurnaround(db, reviewId, 'answer')
  if (!turnaround) throw new Error(`Demo review ${reviewId} has no clock.`)
  const events = await listTurnaroundEvents(db, [turnaround.id])
  const calendars = await getCalendarsById(db, events.map(event => event.calendar_id))
  const replayed = replayTurnaround(events.map(toEvent), calendars)
  if (!replayed.ok) throw new Error(`The events of demo review ${reviewId} do not replay: ${replayed.reason}.`)
  const moved = (status === 'paused' ? pauseTurnaround : stopTurnaround)(replayed.state, atMs, calendars)
  if (!moved.ok) throw new Error(`The clock of demo review ${reviewId} does not move: ${moved.reason}.`)
  await updateTurnaround(db, turnaround.id, {
    status, promised_at_ms: moved.state.promisedAtMs, calendar_id: moved.state.calendarVersionId, stopped_at_ms: status === 'stopped' ? atMs : null,
  })
  await insertTurnaroundEvent(db, {
    id: newId(atMs), turnaround_id: turnaround.id, kind: moved.event.kind, at_ms: atMs,
    calendar_id: moved.event.calendarVersionId, promised_at_ms: moved.event.promisedAtMs, actor_id: null,
  })
}
