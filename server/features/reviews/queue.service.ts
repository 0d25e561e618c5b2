import type { z } from 'zod'
import { ageInYears } from '#shared/domain/people/age'
import { timeInHandMs } from '#shared/domain/turnaround/between'
import type { WorkingCalendar } from '#shared/domain/turnaround/calendar'
import { dayLineSpans } from '#shared/domain/turnaround/day-line'
import type { TurnaroundPause } from '#shared/domain/turnaround/events'
import { replayTurnaround } from '#shared/domain/turnaround/replay'
import { workingToday } from '#shared/domain/turnaround/today'
import type { queueQuery } from '#shared/schemas/reviews'
import type { ClipView, QueueAnswer, QueueRow } from '#shared/types/reviews'
import type { SignedInCtx } from '#server/context'
import { decodeCursor, toPage } from '#server/features/cursor'
import { getStudio } from '#server/features/people/studio.repository'
import { getCalendarFor, getCalendarsById } from '#server/features/turnaround/calendars'
import { listTurnaroundEvents } from '#server/features/turnaround/turnaround.repository'
import { toEvent } from '#server/features/turnaround/turnaround.service'
import type { QueueRecord } from './queue.repository'
import { countOpenTurnarounds, listOpenTurnarounds } from './queue.repository'

/** What waits, is in hand or awaits new film, in order of promise, with the figures that the desk's heading needs. */
export async function readQueue(ctx: SignedInCtx, query: z.output<typeof queueQuery>): Promise<QueueAnswer> {
  const { db, viewer, nowMs } = ctx
  const after = query.cursor === undefined ? undefined : decodeCursor(query.cursor)
  const records = await listOpenTurnarounds(db, viewer, { after, limit: query.limit })
  const page = records.slice(0, query.limit)
  const own = await getCalendarFor(db, viewer.isCoach ? viewer.id : null)
  const calendars = await getCalendarsById(db, page.map(record => record.calendar_id))
  const pauses = await listPauses(ctx, page)
  const { adult_age: adultAge } = await getStudio(db)
  const today = workingToday(own.calendar, nowMs)
  const shown = toPage(records, query.limit, record => toRow(record, {
    viewerId: viewer.id, nowMs, adultAge, calendar: calendars.get(record.calendar_id) ?? own.calendar, pauses: pauses.get(record.id) ?? [],
  }), record => ({ atMs: record.promised_at_ms, id: record.id }))
  return {
    ...shown,
    nowMs,
    dueTodayCount: today ? await countOpenTurnarounds(db, viewer, today.closesAtMs) : 0,
    closesAtMs: today?.closesAtMs ?? null,
    workingMsLeftToday: today?.leftMs ?? 0,
    waitingCount: await countOpenTurnarounds(db, viewer, undefined),
  }
}

interface RowFacts {
  viewerId: string
  nowMs: number
  adultAge: number
  calendar: WorkingCalendar
  pauses: readonly TurnaroundPause[]
}

function toRow(record: QueueRecord, { viewerId, nowMs, adultAge, calendar, pauses }: RowFacts): QueueRow {
  // While the clock stands still the time in hand is what it was when it stopped.
  const standingSinceMs = record.status === 'paused' ? pauses.find(pause => pause.toMs === null)?.fromMs : undefined
  return {
    reviewId: record.review_id,
    turnaroundId: record.id,
    kind: record.kind,
    state: record.state,
    studentName: record.student_name,
    isJunior: ageInYears(record.birth_date, nowMs, record.student_time_zone) < adultAge,
    title: record.title,
    club: record.club,
    coachId: record.coach_id,
    coachName: record.coach_name,
    isMine: record.coach_id === viewerId,
    views: (record.views ?? '').split(',').filter(isClipView),
    startedAtMs: record.started_at_ms,
    promisedAtMs: record.promised_at_ms,
    timeInHandMs: timeInHandMs(calendar, standingSinceMs ?? nowMs, record.promised_at_ms),
    spans: dayLineSpans({ calendar, startMs: record.started_at_ms, promisedAtMs: record.promised_at_ms, nowMs, pauses }),
  }
}

/** Only reviews for which film was asked can have stood still. */
async function listPauses(ctx: SignedInCtx, records: QueueRecord[]): Promise<Map<string, readonly TurnaroundPause[]>> {
  const ids = records.filter(record => record.film_asked_count > 0).map(record => record.id)
  if (ids.length === 0) return new Map()
  const rows = await listTurnaroundEvents(ctx.db, ids)
  const calendars = await getCalendarsById(ctx.db, rows.map(row => row.calendar_id))
  return new Map(ids.flatMap((id) => {
    const replayed = replayTurnaround(rows.filter(row => row.turnaround_id === id).map(toEvent), calendars)
    return replayed.ok ? [[id, replayed.state.pauses]] : []
  }))
}

function isClipView(view: string): view is ClipView {
  return view === 'face_on' || view === 'down_the_line'
}
