import { spawnSync } from 'node:child_process'
import { mkdirSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { sql } from 'kysely'
import { addressesFrom } from '#fakes/demo/addresses'
import { appEnvironment } from '#fakes/demo/environment'
import { openDatabase } from '#server/database/client'
import { migrate } from '#server/database/migrate'

const DIR = '.test/start'

beforeEach(() => mkdirSync(DIR, { recursive: true }))
afterEach(() => rmSync(DIR, { recursive: true, force: true }))

/** Starts the built server and waits for its end; a server that does not end is ended after ten seconds and has no status. */
function startAndWait(environment: Record<string, string | undefined>) {
  return spawnSync(process.execPath, ['.output/server/index.mjs'], {
    encoding: 'utf8', timeout: 10_000, killSignal: 'SIGKILL', env: { PATH: process.env.PATH, ...environment },
  })
}

const WHOLE = appEnvironment(addressesFrom(4371, 4381), DIR)

describe('[house.5] a start that cannot be', () => {
  it('[house.5] names every missing setting and exits 1', () => {
    const { status, stderr } = startAndWait({})
    expect(status).toBe(1)
    for (const name of ['APP_URL', 'DATABASE_PATH', 'NUXT_SESSION_PASSWORD', 'STORAGE_ENDPOINT', 'SMTP_URL', 'STRIPE_SECRET_KEY']) expect(stderr).toContain(`${name}: missing`)
  })

  it('[house.5] refuses a database of a newer version with words and exits 1', async () => {
    const { db, close } = openDatabase(join(DIR, 'turfnote.sqlite'))
    await migrate(db)
    await sql`insert into kysely_migration (name, timestamp) values ('998_from_later', '2030-01-01')`.execute(db)
    await close()
    const { status, stderr } = startAndWait(WHOLE)
    expect(status).toBe(1)
    expect(stderr).toMatch(/newer version of Turfnote/)
  })

  it('[house.5] says that the database file cannot be opened and exits 1', () => {
    const { status, stderr } = startAndWait({ ...WHOLE, DATABASE_PATH: join(DIR, 'no-such-folder', 'turfnote.sqlite') })
    expect(status).toBe(1)
    expect(stderr.length).toBeGreaterThan(0)
  })
})
