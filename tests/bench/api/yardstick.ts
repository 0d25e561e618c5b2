import { randomUUID } from 'node:crypto'
import { createServer } from 'node:http'
import SQLite from 'better-sqlite3'
import { createApp, createRouter, defineEventHandler, readBody, toNodeListener } from 'h3'

/**
 * What the API is measured against: h3 behind node's own server, as Nitro runs it, with the least that an answer of the same kind needs. No
 * sessions, no rules, no query builder, no log. It reads the very rows that the queue shows, from the product's own file, and writes into a
 * file of its own with the product's pragmas (server/database/client.ts).
 */
const shown = new SQLite(process.env.SHOWN_PATH, { readonly: true })
const read = shown.prepare(`
  select turnarounds.id, turnarounds.review_id, turnarounds.kind, turnarounds.started_at_ms, turnarounds.promised_at_ms,
    reviews.state, reviews.title, reviews.club, reviews.coach_id, student.name as student_name, coach.name as coach_name,
    (select group_concat(view) from clips where clips.review_id = reviews.id and clips.state = 'accepted') as views
  from turnarounds
  join reviews on reviews.id = turnarounds.review_id
  join users as student on student.id = reviews.student_id
  left join users as coach on coach.id = reviews.coach_id
  where turnarounds.status <> 'stopped'
  order by turnarounds.promised_at_ms, turnarounds.id
  limit 25
`)

const written = new SQLite(process.env.WRITTEN_PATH)
for (const pragma of ['journal_mode = WAL', 'synchronous = FULL', 'foreign_keys = ON', 'secure_delete = ON']) written.pragma(pragma)
written.exec('create table deeds (id text primary key, subject text not null, at_ms integer not null) strict')
const insertDeed = written.prepare('insert into deeds values (?, ?, ?)')

const router = createRouter()
  .get('/rows', defineEventHandler(() => ({ items: read.all() })))
  .post('/deeds', defineEventHandler(async (event) => {
    const body: unknown = await readBody(event)
    const id = randomUUID()
    insertDeed.run(id, JSON.stringify(body), Date.now())
    return { id }
  }))

createServer(toNodeListener(createApp().use(router))).listen(Number(process.env.PORT), '127.0.0.1', () => process.send?.('ready'))
