import { createMailer } from '#server/adapters/mail'
import { createPayments } from '#server/adapters/payments'
import { createStorage } from '#server/adapters/storage'
import type { Ctx, SignedInCtx } from '#server/context'
import { openDatabase } from '#server/database/client'
import { migrate } from '#server/database/migrate'
import type { Database } from '#server/database/client'
import { composeLetter } from '#server/features/mail/compose'
import { emailKey } from '#server/features/people/email-key'
import { findSessionViewer, insertSession } from '#server/features/sessions/session.repository'
import { newId } from '#server/ids'
import { openLimits } from '#server/limits'
import { createLog } from '#server/log'
import { readSettings } from '#server/settings'

/** Tue 19 May 2026, 08:15 UTC. */
export const NOW_MS = Date.UTC(2026, 4, 19, 8, 15)
export const MINUTE_MS = 60_000
export const HOUR_MS = 60 * MINUTE_MS
export const DAY_MS = 24 * HOUR_MS
export const PASSWORD = 'seven plain words in a row'
/** PASSWORD as it is stored, made once by `node:crypto` alone: hashing it for every person would take most of the tests' time. */
const PASSWORD_HASH = '$scrypt$ln=17,r=8,p=1$bm9ydGhmaWVsZC1zYWx0IQ==$qbzJp5oO/vFxHCmMFnbZfP8huNlQl7rcTu/8ZaWud5g='
/** Where requests come from, unless a test says otherwise. */
export const ADDRESS = '203.0.113.7'

type Role = 'student' | 'guardian' | 'coach' | 'owner'

export interface House {
  db: Database
  /** A context of its own request, at `atMs`, by a visitor or by the person of a session. */
  ctx(options?: { atMs?: number, sessionId?: string }): Promise<Ctx>
  signedInCtx(userId: string, atMs?: number): Promise<SignedInCtx>
  /** Their password is PASSWORD, unless they have none. */
  addPerson(person: { email: string, role?: Role, name?: string, hasPassword?: boolean, isUnconfirmed?: boolean, createdAtMs?: number }): Promise<string>
  /** The letters that wait, composed as they would be sent now, oldest first; those that would not be sent are left out. */
  letters(atMs?: number): Promise<{ letter: string, to: string, subject: string, text: string, token: string | undefined }[]>
  close(): Promise<void>
}

/** A real database in memory with the studio in it; every adapter is the real one, pointed at nobody unless `storageUrl` is given. */
export async function openHouse({ storageUrl = 'http://127.0.0.1:9', limitsFactor = 1 } = {}): Promise<House> {
  const settings = readSettings({
    APP_URL: 'https://lessons.northfield.test',
    DATABASE_PATH: ':memory:',
    NUXT_SESSION_PASSWORD: 'a-session-password-for-tests-only-0123456789',
    STORAGE_ENDPOINT: storageUrl,
    STORAGE_REGION: 'eu-test-1',
    STORAGE_BUCKET: 'film',
    STORAGE_ACCESS_KEY: 'TESTKEY',
    STORAGE_SECRET_KEY: 'test-secret',
    STRIPE_SECRET_KEY: 'sk_test_1',
    STRIPE_WEBHOOK_SECRET: 'whsec_1',
    STRIPE_API_BASE: 'http://127.0.0.1:9',
    SMTP_URL: 'smtp://127.0.0.1:9',
    MAIL_FROM: 'Northfield Studio <post@northfield.test>',
  }, 'main.mjs')
  const { db, writeCount, close } = openDatabase(':memory:')
  await migrate(db)
  await db.insertInto('studio')
    .values({ id: 1, name: 'Northfield Studio', time_zone: 'Europe/Lisbon', currency: 'EUR', contact_email: 'post@northfield.test' })
    .execute()
  const limits = openLimits(':memory:', limitsFactor)
  const mail = createMailer({ smtpUrl: settings.mail.smtpUrl, from: settings.mail.from })
  const shared = { db, writeCount, settings, limits, mail, storage: createStorage(settings.storage), payments: createPayments(settings.payments), log: createLog('silent') }
  let requests = 0

  async function ctx({ atMs = NOW_MS, sessionId }: { atMs?: number, sessionId?: string } = {}): Promise<Ctx> {
    const row = sessionId === undefined ? undefined : await findSessionViewer(db, sessionId, atMs)
    const viewer = row && sessionId !== undefined
      ? { id: row.user_id, role: row.role, isCoach: row.coach_user_id !== null, sessionId }
      : undefined
    return { ...shared, viewer, nowMs: atMs, requestId: `request-${requests++}`, pokesAfterWrite: new Set(), poke: () => {} }
  }

  return {
    db,
    ctx,
    async signedInCtx(userId, atMs = NOW_MS) {
      const sessionId = newId(atMs)
      await insertSession(db, { id: sessionId, userId, nowMs: atMs, expiresAtMs: atMs + DAY_MS })
      const { viewer, ...rest } = await ctx({ atMs, sessionId })
      if (!viewer) throw new Error('This person cannot sign in.')
      return { ...rest, viewer }
    },
    async addPerson({ email, role = 'student', name = 'Joel Okafor', hasPassword = true, isUnconfirmed = false, createdAtMs = NOW_MS - DAY_MS }) {
      const id = newId(createdAtMs)
      await db.insertInto('users').values({
        id, email, email_key: emailKey(email), name, role, time_zone: 'Europe/London',
        password_hash: hasPassword ? PASSWORD_HASH : null,
        email_confirmed_at_ms: isUnconfirmed ? null : createdAtMs,
        suspended_at_ms: null, picture_key: null, created_at_ms: createdAtMs,
      }).execute()
      if (role === 'student') await db.insertInto('students').values({ user_id: id, birth_date: '1990-01-01', handedness: 'right' }).execute()
      if (role === 'coach') await db.insertInto('coaches').values({ user_id: id, slug: `coach-${id}` }).execute()
      return id
    },
    async letters(atMs = NOW_MS) {
      const rows = await db.selectFrom('outbox').selectAll().where('state', '=', 'waiting').orderBy('created_at_ms').orderBy('id').execute()
      const letters = []
      for (const row of rows) {
        const composed = await composeLetter(await ctx({ atMs }), row)
        if (!composed) continue
        const token = /[?&]token=([A-Za-z0-9_-]+)/.exec(composed.text)?.[1]
        letters.push({ letter: row.letter, to: composed.to.address, subject: composed.subject, text: composed.text, token })
      }
      return letters
    },
    async close() {
      limits.close()
      mail.close()
      await close()
    },
  }
}
