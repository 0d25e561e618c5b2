import type { WorkingCalendar } from '#shared/domain/turnaround/calendar'
import type { Database } from '#server/database/client'
import { insertCredit } from '#server/features/offers/credit.repository'
import { insertCalendar } from '#server/features/turnaround/turnaround.repository'
import { newId } from '#server/ids'
import { DEMO_TIME_ZONE } from './people'

const HOUR_MS = 60 * 60 * 1000
const EVERY_DAY = [1, 2, 3, 4, 5, 6, 7]

/** Working minutes of the day; the studio stands for "first free". */
const HOURS = {
  studio: { fromMinute: 9 * 60, toMinute: 18 * 60 },
  coach: { fromMinute: 9 * 60, toMinute: 18 * 60 },
  coach2: { fromMinute: 12 * 60, toMinute: 20 * 60 },
} as const

/** The hours by which a demo review is promised. */
export function demoHours(coach: 'coach' | 'coach2' | null): WorkingCalendar {
  return { timeZone: DEMO_TIME_ZONE, weekly: EVERY_DAY.map(weekday => ({ weekday, ...HOURS[coach ?? 'studio'] })), timeOff: [] }
}

/** Open every day, so that a demo on a Sunday has something to show. */
export async function insertDemoHours(db: Database, nowMs: number, coachIds: { coach: string, coach2: string }): Promise<void> {
  for (const coach of [null, 'coach', 'coach2'] as const) {
    const { timeZone, weekly, timeOff } = demoHours(coach)
    await insertCalendar(db, {
      id: newId(nowMs),
      coach_id: coach === null ? null : coachIds[coach],
      version: 1,
      time_zone: timeZone,
      weekly: JSON.stringify(weekly),
      time_off: JSON.stringify(timeOff),
      created_at_ms: nowMs,
    })
  }
}

export interface DemoOffers {
  singleVersionId: string
  seriesVersionId: string
}

export async function insertDemoOffers(db: Database, nowMs: number): Promise<DemoOffers> {
  const versionOf = async (sortOrder: number, offer: { kind: 'single' | 'series', name: string, reviewCount: number, priceMinor: number }): Promise<string> => {
    const offerId = newId(nowMs)
    const versionId = newId(nowMs)
    await db.insertInto('offers').values({ id: offerId, kind: offer.kind, sort_order: sortOrder }).execute()
    await db.insertInto('offer_versions').values({
      id: versionId, offer_id: offerId, version: 1, name: offer.name, review_count: offer.reviewCount, price_minor: offer.priceMinor,
      currency: 'GBP', turnaround_ms: 9 * HOUR_MS, follow_ups_included: 2, created_at_ms: nowMs,
    }).execute()
    return versionId
  }
  return {
    singleVersionId: await versionOf(1, { kind: 'single', name: 'One review', reviewCount: 1, priceMinor: 4500 }),
    seriesVersionId: await versionOf(2, { kind: 'series', name: 'Five reviews', reviewCount: 5, priceMinor: 19_500 }),
  }
}

export async function giveCredits(db: Database, nowMs: number, input: { studentId: string, versionId: string, count: number }): Promise<void> {
  for (let index = 0; index < input.count; index += 1) {
    await insertCredit(db, { id: newId(nowMs), student_id: input.studentId, offer_version_id: input.versionId, granted_at_ms: nowMs })
  }
}
