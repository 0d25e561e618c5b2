import { randomUUID } from 'node:crypto'
import { createServer } from 'node:http'
import SQLite from 'better-sqlite3'
import { createApp, createRouter, defineEventHandler, readBody, toNodeListener } from 'h3'

/**
 * What the API is measured against: h3 behind node's own server, as Nitro runs it, with the least that an answer of the same kind needs. No
 * sessions, no rules, no log. Its database has the pragmas of the product's own (server/database/client.ts).
 */
const port = Number(process.env.PORT)
const handle = new SQLite(process.env.DATABASE_PATH)
for (const pragma of ['journal_mode = WAL', 'synchronous = FULL', 'foreign_keys = ON', 'secure_delete = ON']) handle.pragma(pragma)

handle.exec(`
  create table waiting (
    id text primary key, student_name text not null, coach_name text, title text not null, club text not null, state text not null,
    views text not null, started_at_ms integer not null, promised_at_ms integer not null
  ) strict;
  create index waiting_by_promise on waiting (promised_at_ms, id);
  create table deeds (id text primary key, subject text not null, at_ms integer not null) strict;
`)
const insertWaiting = handle.prepare('insert into waiting values (?, ?, ?, ?, ?, ?, ?, ?, ?)')
for (let index = 0; index < Number(process.env.ROWS); index += 1) {
  const startedAtMs = 1_800_000_000_000 + index * 60_000
  insertWaiting.run(
    randomUUID(), 'Joel Osei', null, `Heavy, then thin, number ${index}`, '7-iron', 'waiting', 'face_on,down_the_line', startedAtMs, startedAtMs + 86_400_000,
  )
}

const read = handle.prepare('select * from waiting order by promised_at_ms, id limit 25')
const insertDeed = handle.prepare('insert into deeds values (?, ?, ?)')

const router = createRouter()
  .get('/rows', defineEventHandler(() => ({ items: read.all() })))
  .post('/deeds', defineEventHandler(async (event) => {
    const body: unknown = await readBody(event)
    const id = randomUUID()
    insertDeed.run(id, JSON.stringify(body), Date.now())
    return { id }
  }))

createServer(toNodeListener(createApp().use(router))).listen(port, '127.0.0.1', () => process.send?.('ready'))
