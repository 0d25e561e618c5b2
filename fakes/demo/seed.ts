import type { App } from '#server/app'
import { createApp } from '#server/app'
import type { SignedInCtx } from '#server/context'
import { contextOf } from '#server/context'
import { inTransaction } from '#server/database/transaction'
import { hashPassword } from '#server/features/people/passwords/password-hash'
import { readSettings } from '#server/settings'
import { giveCredits, insertDemoHours, insertDemoOffers } from './offers'
import type { DemoKey } from './people'
import { DEMO_ACCOUNTS, DEMO_PASSWORD, insertDemoPeople } from './people'
import { insertDemoReviews } from './reviews'

const DAY_MS = 24 * 60 * 60 * 1000

/** What making a rehearsal needs: the app's own services, called as one of the people at a moment of the past. */
export interface Rehearsal {
  app: App
  nowMs: number
  ids: Record<DemoKey, string>
  as(key: DemoKey, atMs: number): SignedInCtx
}

/**
 * Makes the invented studio through the product's own services, so that every promise, letter and count is what they make of it.
 * The stand-ins must be running; the app must not.
 */
export async function seedDemo(environment: Record<string, string>): Promise<void> {
  const app = await openApp(environment)
  try {
    const rehearsal = await insertStudio(app, Date.now())
    await insertDemoReviews(rehearsal)
  }
  finally {
    await app.close()
  }
}

/** The app's insides without its server, with an up-to-date database. The caller closes it. */
export async function openApp(environment: Record<string, string>): Promise<App> {
  // Said once a start otherwise: the SDK will ask for a newer Node next year.
  process.env.AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED ??= 'true'
  const app = createApp(readSettings(environment, '.output/server/index.mjs'))
  await app.ready
  return app
}

/** People, hours, offers and credits; no reviews. */
export async function insertStudio(app: App, nowMs: number): Promise<Rehearsal> {
  const passwordHash = await hashPassword(DEMO_PASSWORD)
  const foundedAtMs = nowMs - 60 * DAY_MS
  const ids = await inTransaction(app.db, async (db) => {
    const people = await insertDemoPeople(db, foundedAtMs, passwordHash)
    await insertDemoHours(db, foundedAtMs, people)
    const { singleVersionId, seriesVersionId } = await insertDemoOffers(db, foundedAtMs)
    // What the demo's reviews use up, and what is left of it: the student holds two.
    await giveCredits(db, foundedAtMs, { studentId: people.student, versionId: seriesVersionId, count: 5 })
    await giveCredits(db, foundedAtMs, { studentId: people.student2, versionId: singleVersionId, count: 3 })
    await giveCredits(db, foundedAtMs, { studentId: people.student3, versionId: singleVersionId, count: 2 })
    await giveCredits(db, foundedAtMs, { studentId: people.junior, versionId: singleVersionId, count: 2 })
    return people
  })
  return { app, nowMs, ids, as: (key, atMs) => contextAs(app, ids, key, atMs) }
}

function contextAs(app: App, ids: Record<DemoKey, string>, key: DemoKey, atMs: number): SignedInCtx {
  const role = DEMO_ACCOUNTS.find(account => account.key === key)?.role ?? 'student'
  const viewer = { id: ids[key], role, isCoach: role === 'coach', sessionId: '' }
  // The rehearsal's server is not running yet: it sends the letters when it starts.
  return { ...contextOf(app, { viewer, requestId: 'rehearsal' }), viewer, nowMs: atMs, poke: () => undefined }
}
