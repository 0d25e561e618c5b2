import type { Migration } from 'kysely'
import { sql } from 'kysely'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import type { OpenDatabase } from '#server/database/client'
import { openDatabase } from '#server/database/client'
import { MigrationFailed, NewerDatabase, doneMigrations, migrate } from '#server/database/migrate'
import { migrations } from '#server/database/migrations'

let open: OpenDatabase

beforeEach(() => {
  open = openDatabase(':memory:')
})

afterEach(() => open.close())

async function tables(): Promise<string[]> {
  const { rows } = await sql<{ name: string }>`select name from sqlite_master where type = 'table' order by name`.execute(open.db)
  return rows.map(row => row.name)
}

const HALF_DONE: Migration = {
  async up(db) {
    await sql`create table half_done (id integer primary key) strict`.execute(db)
    await sql`insert into half_done (id) values (1)`.execute(db)
    await sql`insert into nowhere (id) values (1)`.execute(db)
  },
}

describe('migrations', () => {
  it('[house.5] leave nothing behind when one fails, and can be run again', async () => {
    await migrate(open.db)
    const before = await tables()
    await expect(migrate(open.db, { ...migrations, '999_half_done': HALF_DONE })).rejects.toBeInstanceOf(MigrationFailed)
    expect(await tables()).toEqual(before)
    expect(await doneMigrations(open.db)).toEqual(Object.keys(migrations).sort())
    expect(await migrate(open.db)).toBe(0)
  })

  it('name the migration that failed', async () => {
    await expect(migrate(open.db, { '001_half_done': HALF_DONE })).rejects.toThrow(/001_half_done failed and was undone/)
  })

  it('run once', async () => {
    expect(await migrate(open.db)).toBe(Object.keys(migrations).length)
    expect(await migrate(open.db)).toBe(0)
  })

  it('[house.5] refuse a database of a newer version with clear words', async () => {
    await migrate(open.db)
    await sql`insert into kysely_migration (name, timestamp) values ('998_from_later', '2030-01-01')`.execute(open.db)
    await expect(migrate(open.db)).rejects.toBeInstanceOf(NewerDatabase)
    await expect(migrate(open.db)).rejects.toThrow(/newer version of Turfnote.*998_from_later/)
  })
})

describe('the schema', () => {
  beforeEach(async () => {
    await migrate(open.db)
  })

  it('has STRICT tables only', async () => {
    const { rows } = await sql<{ name: string }>`select name from pragma_table_list where schema = 'main' and type = 'table' and strict = 0 and name not like 'sqlite_%' and name not like 'kysely_%'`.execute(open.db)
    expect(rows).toEqual([])
  })

  it('keeps foreign keys on', async () => {
    const { rows } = await sql<{ foreign_keys: number }>`pragma foreign_keys`.execute(open.db)
    expect(rows[0]?.foreign_keys).toBe(1)
  })

  for (const table of ['offer_versions', 'provider_events', 'calendars', 'turnaround_events', 'audit_events', 'viewings']) {
    it(`refuses to change or delete rows of ${table}`, async () => {
      const { rows } = await sql<{ sql: string }>`select sql from sqlite_master where type = 'trigger' and tbl_name = ${table}`.execute(open.db)
      expect(rows).toHaveLength(2)
    })
  }

  it('refuses changes to what is only added to', async () => {
    await sql`insert into audit_events (id, at_ms, deed) values ('a', 1, 'signed-in')`.execute(open.db)
    await expect(sql`update audit_events set at_ms = 2`.execute(open.db)).rejects.toThrow(/only added to/)
    await expect(sql`delete from audit_events`.execute(open.db)).rejects.toThrow(/only added to/)
  })
})
