import { z } from 'zod'
import type { WorkingCalendar } from '#shared/domain/turnaround/calendar'
import type { Database } from '#server/database/client'
import type { CalendarRow } from './turnaround.repository'
import { findCalendar, listCalendars } from './turnaround.repository'

const weeklySchema = z.array(z.object({ weekday: z.number(), fromMinute: z.number(), toMinute: z.number() }))
const timeOffSchema = z.array(z.object({ fromMs: z.number(), toMs: z.number() }))

/** A version of working hours with its id. Versions are never changed, so one that was read once needs no second reading. */
export interface CalendarVersion {
  id: string
  calendar: WorkingCalendar
}

const MAX_KEPT = 1000
const kept = new Map<string, WorkingCalendar>()

function toVersion(row: CalendarRow): CalendarVersion {
  const known = kept.get(row.id)
  if (known) return { id: row.id, calendar: known }
  const calendar: WorkingCalendar = {
    timeZone: row.time_zone,
    weekly: weeklySchema.parse(JSON.parse(row.weekly)),
    timeOff: timeOffSchema.parse(JSON.parse(row.time_off)),
  }
  if (kept.size >= MAX_KEPT) kept.clear()
  kept.set(row.id, calendar)
  return { id: row.id, calendar }
}

/** The calendar by which a review is promised: the chosen coach's, or the studio's for "first free" and for coaches without one. */
export async function getCalendarFor(db: Database, coachId: string | null): Promise<CalendarVersion> {
  const own = coachId === null ? undefined : await findCalendar(db, coachId)
  const row = own ?? await findCalendar(db, null)
  if (!row) throw new Error('The studio has no working hours.')
  return toVersion(row)
}

/** Calendars by their ids, for replaying events and drawing lines. */
export async function getCalendarsById(db: Database, ids: Iterable<string>): Promise<Map<string, WorkingCalendar>> {
  const wanted = [...new Set(ids)]
  const missing = wanted.filter(id => !kept.has(id))
  const found = new Map(missing.length > 0 ? (await listCalendars(db, missing)).map(row => [row.id, toVersion(row).calendar]) : [])
  return new Map(wanted.flatMap((id) => {
    const calendar = kept.get(id) ?? found.get(id)
    return calendar ? [[id, calendar]] : []
  }))
}
