import type { Insertable, Selectable } from 'kysely'
import { sql } from 'kysely'
import type { Database } from '#server/database/client'
import type { CalendarsTable, TurnaroundEventsTable, TurnaroundsTable } from '#server/database/schema/turnaround'

export type CalendarRow = Selectable<CalendarsTable>
export type TurnaroundRow = Selectable<TurnaroundsTable>
export type TurnaroundEventRow = Selectable<TurnaroundEventsTable>

/** The calendar in force: a coach's own, or the studio's for null. */
export async function findCalendar(db: Database, coachId: string | null): Promise<CalendarRow | undefined> {
  return db.selectFrom('calendars').selectAll()
    .where(sql`ifnull(coach_id, '')`, '=', coachId ?? '')
    .orderBy('version', 'desc')
    .limit(1)
    .executeTakeFirst()
}

export async function listCalendars(db: Database, ids: readonly string[]): Promise<CalendarRow[]> {
  return db.selectFrom('calendars').selectAll().where('id', 'in', ids).execute()
}

export async function insertCalendar(db: Database, row: Insertable<CalendarsTable>): Promise<void> {
  await db.insertInto('calendars').values(row).execute()
}

export async function insertTurnaround(db: Database, row: Insertable<TurnaroundsTable>): Promise<void> {
  await db.insertInto('turnarounds').values(row).execute()
}

export async function updateTurnaround(
  db: Database, id: string, change: Pick<TurnaroundRow, 'status' | 'promised_at_ms' | 'stopped_at_ms' | 'calendar_id'>,
): Promise<void> {
  await db.updateTable('turnarounds').set(change).where('id', '=', id).execute()
}

/** The newest turnaround of a kind; a review has one answer turnaround, and a second when its answer did not answer. */
export async function findTurnaround(db: Database, reviewId: string, kind: TurnaroundRow['kind']): Promise<TurnaroundRow | undefined> {
  return db.selectFrom('turnarounds').selectAll()
    .where('review_id', '=', reviewId).where('kind', '=', kind)
    .orderBy('sequence', 'desc')
    .limit(1)
    .executeTakeFirst()
}

export async function insertTurnaroundEvent(db: Database, row: Insertable<TurnaroundEventsTable>): Promise<void> {
  await db.insertInto('turnaround_events').values(row).execute()
}

/** Events of some turnarounds, in the order in which they happened. */
export async function listTurnaroundEvents(db: Database, turnaroundIds: readonly string[]): Promise<TurnaroundEventRow[]> {
  return db.selectFrom('turnaround_events').selectAll()
    .where('turnaround_id', 'in', turnaroundIds)
    .orderBy('turnaround_id').orderBy('at_ms').orderBy('id')
    .execute()
}
