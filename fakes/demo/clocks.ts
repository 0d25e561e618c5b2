import { pauseTurnaround, stopTurnaround } from '#shared/domain/turnaround/moves'
import { replayTurnaround } from '#shared/domain/turnaround/replay'
import type { Database } from '#server/database/client'
import { updateReview } from '#server/features/reviews/review.repository'
import { getCalendarsById } from '#server/features/turnaround/calendars'
import { findTurnaround, insertTurnaroundEvent, listTurnaroundEvents, updateTurnaround } from '#server/features/turnaround/turnaround.repository'
import { toEvent } from '#server/features/turnaround/turnaround.service'
import { newId } from '#server/ids'

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
