import { readFile } from 'node:fs/promises'
import { setTimeout as wait } from 'node:timers/promises'
import { sql } from 'kysely'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import type { OpenDatabase } from '#server/database/client'
import { openDatabase } from '#server/database/client'
import { migrate } from '#server/database/migrate'
import { EventLoopTurned, OuterHandleUsed, inTransaction } from '#server/database/transaction'

let open: OpenDatabase

beforeEach(async () => {
  open = openDatabase(':memory:')
  await migrate(open.db)
})

afterEach(() => open.close())

async function insertStudio(db: OpenDatabase['db'], name: string): Promise<void> {
  await db.insertInto('studio').values({ id: 1, name, time_zone: 'Europe/London', currency: 'GBP', contact_email: 'a@b.test' }).execute()
}

async function countStudios(): Promise<number> {
  return (await open.db.selectFrom('studio').select('id').execute()).length
}

describe('[house.4] inTransaction', () => {
  it('[house.4] commits what the work did and gives its result', async () => {
    const result = await inTransaction(open.db, async (db) => {
      await insertStudio(db, 'Kept')
      return 7
    })
    expect(result).toBe(7)
    expect(await countStudios()).toBe(1)
  })

  it('[house.4] rolls back when the work throws, and throws the same error', async () => {
    const fault = new Error('no')
    await expect(inTransaction(open.db, async (db) => {
      await insertStudio(db, 'Lost')
      throw fault
    })).rejects.toBe(fault)
    expect(await countStudios()).toBe(0)
  })

  it('[house.4] throws when the outer handle is used inside, and rolls back', async () => {
    await expect(inTransaction(open.db, async (db) => {
      await insertStudio(db, 'Lost')
      await open.db.selectFrom('studio').selectAll().execute()
    })).rejects.toBeInstanceOf(OuterHandleUsed)
    expect(await countStudios()).toBe(0)
  })

  it('[house.4] throws when a transaction is opened within another, on either handle', async () => {
    await expect(inTransaction(open.db, () => inTransaction(open.db, async () => 1))).rejects.toBeInstanceOf(OuterHandleUsed)
    await expect(inTransaction(open.db, db => inTransaction(db, async () => 1))).rejects.toBeInstanceOf(OuterHandleUsed)
  })

  const waits: [string, () => Promise<unknown>][] = [
    ['a timer', () => wait(5)],
    ['a timer of no time', () => wait(0)],
    ['an immediate', () => new Promise(resolve => setImmediate(resolve))],
    ['a file', () => readFile('package.json')],
  ]
  for (const [name, waiting] of waits) {
    it(`[house.4] throws when the work waits for ${name}, and rolls back`, async () => {
      await expect(inTransaction(open.db, async (db) => {
        await insertStudio(db, 'Lost')
        await waiting()
      })).rejects.toBeInstanceOf(EventLoopTurned)
      expect(await countStudios()).toBe(0)
    })
  }

  it('[house.4] lets 300 at once pass, one after the other', async () => {
    await sql`create table counted (n integer not null) strict`.execute(open.db)
    await Promise.all(Array.from({ length: 300 }, () => inTransaction(open.db, async (db) => {
      const { rows } = await sql<{ last: number | null }>`select max(n) as last from counted`.execute(db)
      await sql`insert into counted (n) values (${(rows[0]?.last ?? 0) + 1})`.execute(db)
    })))
    const { rows } = await sql<{ count: number, last: number }>`select count(*) as count, max(n) as last from counted`.execute(open.db)
    expect(rows[0]).toEqual({ count: 300, last: 300 })
  })

  it('[house.4] goes on after a refused one', async () => {
    await expect(inTransaction(open.db, () => wait(1))).rejects.toBeInstanceOf(EventLoopTurned)
    await inTransaction(open.db, db => insertStudio(db, 'Kept'))
    expect(await countStudios()).toBe(1)
  })
})
