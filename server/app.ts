import type { Clock } from './adapters/clock'
import { createClock } from './adapters/clock'
import type { Mailer } from './adapters/mail'
import { createMailer } from './adapters/mail'
import type { Payments } from './adapters/payments'
import { createPayments } from './adapters/payments'
import type { FilmStorage } from './adapters/storage'
import { createStorage } from './adapters/storage'
import type { Database } from './database/client'
import { openDatabase } from './database/client'
import { migrate } from './database/migrate'
import type { Jobs } from './features/jobs/jobs'
import { createJobs } from './features/jobs/jobs'
import type { Limits } from './limits'
import { openLimits } from './limits'
import type { Log } from './log'
import { createLog } from './log'
import type { Settings } from './settings'

/** Everything that outlives a request. Made once at the start; services get what they need of it through their `ctx`. */
export interface App {
  settings: Settings
  db: Database
  /** See `OpenDatabase`. */
  writeCount(): number
  clock: Clock
  storage: FilmStorage
  payments: Payments
  mail: Mailer
  limits: Limits
  log: Log
  jobs: Jobs
  /** Settles when the database is at this version; rejects when it cannot be. */
  ready: Promise<void>
  close(): Promise<void>
}

/**
 * Opens the database and makes the adapters; `ready` then brings the database up to date.
 * @throws when a file cannot be opened.
 */
export function createApp(settings: Settings): App {
  const { db, writeCount, close: closeDatabase } = openDatabase(settings.databasePath)
  const limits = openLimits(settings.limitsDatabasePath, settings.limitsFactor)
  const mail = createMailer({ smtpUrl: settings.mail.smtpUrl, from: settings.mail.from })
  const app: App = {
    settings,
    db,
    writeCount,
    clock: createClock(settings.clockOffsetFile),
    storage: createStorage(settings.storage),
    payments: createPayments(settings.payments),
    mail,
    limits,
    log: createLog(settings.logLevel),
    jobs: createJobs(() => app),
    ready: migrate(db).then(() => undefined),
    async close() {
      mail.close()
      limits.close()
      await closeDatabase()
    },
  }
  return app
}
