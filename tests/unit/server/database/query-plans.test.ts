import SQLite from 'better-sqlite3'
import { Kysely, SqliteDialect, sql } from 'kysely'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { ViewerFacts } from '#server/context'
import type { Database } from '#server/database/client'
import { openDatabase } from '#server/database/client'
import { migrate } from '#server/database/migrate'
import type { Tables } from '#server/database/schema'
import {
  findClipsNaming, findPhotosNaming, listAbandonedClips, listClipsNeeding, listKnownUploadIds, listPhotosNeeding,
} from '#server/features/film/sweep/sweep.repository'
import { listSwings, listSwingsOfReview } from '#server/features/film/swing.repository'
import { claimDueLetters } from '#server/features/mail/outbox.repository'
import { findOpenOrder, listOrdersToLookAt } from '#server/features/money/order.repository'
import { listRefundsDue } from '#server/features/money/refund.repository'
import { findOldestCredit } from '#server/features/offers/credit.repository'
import { listUsers } from '#server/features/people/user.repository'
import { listPhotos } from '#server/features/photos/photo.repository'
import { listClubs } from '#server/features/profile/profile.repository'
import { listClips, listUnjoinedClips, listUnreadClips } from '#server/features/reviews/clip.repository'
import { findDraft, findLetter } from '#server/features/reviews/letter.repository'
import { countOpenTurnarounds, listOpenTurnarounds } from '#server/features/reviews/queue.repository'
import { findVisibleReview, listReviewTimesMs, listVisibleReviews, nextReviewNumber } from '#server/features/reviews/review.repository'
import { findSessionViewer } from '#server/features/sessions/session.repository'
import { findCalendar, findTurnaround, listTurnaroundEvents } from '#server/features/turnaround/turnaround.repository'

/** A handle that notes the plan of every query before it runs. */
let handle: SQLite.Database
let db: Database
let plans: { text: string, steps: string[] }[] = []

beforeAll(async () => {
  handle = new SQLite(':memory:')
  const noting = {
    prepare(text: string) {
      if (/^\s*(select|update|delete|insert)/i.test(text)) notePlan(text)
      return handle.prepare(text)
    },
    close: () => handle.close(),
  }
  await copySchema()
  db = new Kysely<Tables>({ dialect: new SqliteDialect({ database: noting }) })
})

afterAll(() => handle.close())

async function copySchema(): Promise<void> {
  const real = openDatabase(':memory:')
  await migrate(real.db)
  const { rows } = await sql<{ sql: string }>`select sql from sqlite_master where sql is not null and name not like 'kysely_%' and name not like 'sqlite_%'`.execute(real.db)
  for (const row of rows) handle.exec(row.sql)
  await real.close()
}

function notePlan(text: string): void {
  const parameters = (text.match(/\?/g) ?? []).map(() => null)
  const steps = handle.prepare(`explain query plan ${text}`).all(...parameters)
    .map(row => typeof row === 'object' && row !== null && 'detail' in row ? String(row.detail) : '')
  plans.push({ text, steps })
}

async function plansOf(run: () => Promise<unknown>): Promise<string[]> {
  plans = []
  // The tables are empty: what matters is how they would be read.
  await run().catch(() => undefined)
  expect(plans.length).toBeGreaterThan(0)
  return plans.flatMap(plan => plan.steps)
}

const viewer = (role: ViewerFacts['role'], isCoach = false): ViewerFacts => ({ id: 'v', role, isCoach, sessionId: 's' })
const PAGE = { after: { atMs: 1, id: 'x' }, limit: 25 }
/** One row by its nature, small lists that a studio can count on its fingers, or a list that comes with the query. */
const SMALL = /SCAN (coaches|studio|offers|invites|json_each)\b/

const HOT: [string, () => Promise<unknown>][] = [
  ['reviews of a student', () => listVisibleReviews(db, viewer('student'), { states: undefined, ...PAGE })],
  ['reviews of the owner', () => listVisibleReviews(db, viewer('owner'), { states: undefined, ...PAGE })],
  ['reviews of a coach', () => listVisibleReviews(db, viewer('coach', true), { states: undefined, ...PAGE })],
  ['one review', () => findVisibleReview(db, viewer('student'), 'r')],
  ['one review of a guardian', () => findVisibleReview(db, viewer('guardian'), 'r')],
  ['number of the next review', () => nextReviewNumber(db, 's')],
  ['queue of a coach', () => listOpenTurnarounds(db, viewer('coach', true), PAGE)],
  ['queue of the owner', () => listOpenTurnarounds(db, viewer('owner'), PAGE)],
  ['what is due today', () => countOpenTurnarounds(db, viewer('coach', true), 1)],
  ['usual review time', () => listReviewTimesMs(db, 'c', 20)],
  ['session', () => findSessionViewer(db, 's', 1)],
  ['clips of a review', () => listClips(db, 'r')],
  ['unread clips', () => listUnreadClips(db, 1, 20)],
  ['clips whose parts are not joined', () => listUnjoinedClips(db, 1, 20)],
  ['swings of a clip', () => listSwings(db, 'c')],
  ['swings of a review', () => listSwingsOfReview(db, 'r')],
  ['photographs of a review', () => listPhotos(db, 'r')],
  ['clubs of a student', () => listClubs(db, 's')],
  ['abandoned uploads', () => listAbandonedClips(db, 1, 100)],
  ['uploads that the store has', () => listKnownUploadIds(db, ['a', 'b'])],
  ['clips whose film the store has', () => findClipsNaming(db, ['a', 'b'])],
  ['clips that need film', () => listClipsNeeding(db, { afterKey: 'film/', toKey: 'film0', beforeMs: 1 })],
  ['photographs that the store has', () => findPhotosNaming(db, ['a', 'b'])],
  ['photographs that need a picture', () => listPhotosNeeding(db, { afterKey: 'photos/', toKey: 'photos0', beforeMs: 1 })],
  ['draft', () => findDraft(db, 'r', 'c')],
  ['letter', () => findLetter(db, 'r')],
  ['turnaround', () => findTurnaround(db, 'r', 'answer')],
  ['events of turnarounds', () => listTurnaroundEvents(db, ['a', 'b'])],
  ['calendar', () => findCalendar(db, 'c')],
  ['oldest credit', () => findOldestCredit(db, 's')],
  ['letters that are due', () => claimDueLetters(db, 1, 5, 1)],
  ['page to pay on', () => findOpenOrder(db, 'r')],
  ['orders to look at', () => listOrdersToLookAt(db, 1, 20)],
  ['refunds that are due', () => listRefundsDue(db, 1, 10)],
  ['people', () => listUsers(db, { atMs: 1, id: 'x' }, 25)],
]

describe('plans of hot queries', () => {
  for (const [name, run] of HOT) {
    it(`${name}: searched by an index, not scanned, not sorted aside`, async () => {
      const steps = await plansOf(run)
      expect(steps.filter(step => (/^SCAN /.test(step) && !/USING (COVERING )?INDEX/.test(step) && !SMALL.test(step)) || /TEMP B-TREE/.test(step))).toEqual([])
    })
  }

  it('would notice a scan', async () => {
    const steps = await plansOf(() => db.selectFrom('reviews').selectAll().where('title', '=', 'x').execute())
    expect(steps.some(step => /^SCAN reviews/.test(step))).toBe(true)
  })
})
