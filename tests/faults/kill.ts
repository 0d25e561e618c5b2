import { randomUUID } from 'node:crypto'
import { setTimeout as wait } from 'node:timers/promises'
import SQLite from 'better-sqlite3'
import { z } from 'zod'
import { call } from '#tests/support/call'
import { makeTemplate } from '#tests/support/template'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'
import type { Fault } from './fault'
import { seededChance } from './fault'

const KILLS = 200
const WRITERS = 8
const WORLD_INDEX = 38
const SEED = 20_260_104
/** Between two kills, at random: long enough for some writes, short enough to hit all their moments. */
const LEAST_MS = 100
const MOST_MS = 600

interface Written {
  id: string
  title: string
}

export const kill: Fault = {
  about: `${KILLS} times kill -9 under load: what was acknowledged is there, once, and the database is whole`,
  async run(tell) {
    await makeTemplate()
    const world = await startWorld({ index: WORLD_INDEX })
    try {
      const written = await writeThroughKills(world, tell)
      tell(`${written.length} acknowledged writes through ${KILLS} kills`)
      await world.app.stop()
      const problems = judge(databaseOf(world), written)
      return written.length < KILLS ? [...problems, 'Fewer writes than kills: the load was too thin to say anything.'] : problems
    }
    finally {
      await world.close()
    }
  },
  async control() {
    await makeTemplate()
    const world = await startWorld({ index: WORLD_INDEX })
    try {
      const kept = await writeOne(world, 'kept')
      const lost = await writeOne(world, 'lost')
      await world.app.stop()
      if (!kept || !lost) throw new Error('The control could not write.')
      const handle = new SQLite(databaseOf(world))
      handle.prepare('delete from reviews where id = ?').run(lost.id)
      handle.close()
      return judge(databaseOf(world), [kept, lost])
    }
    finally {
      await world.close()
    }
  },
}

async function writeThroughKills(world: World, tell: (line: string) => void): Promise<Written[]> {
  const written: Written[] = []
  const chance = seededChance(SEED)
  let isOver = false
  async function writer(name: number): Promise<void> {
    for (let count = 0; !isOver; count += 1) {
      const one = await writeOne(world, `Question ${name}-${count}`, () => isOver)
      if (one) written.push(one)
    }
  }
  const writers = Array.from({ length: WRITERS }, (_, name) => writer(name))
  try {
    for (let count = 1; count <= KILLS; count += 1) {
      await wait(LEAST_MS + chance() * (MOST_MS - LEAST_MS))
      await world.restart({ signal: 'SIGKILL' })
      if (count % 20 === 0) tell(`${count} kills, ${written.length} acknowledged writes`)
    }
  }
  finally {
    isOver = true
    await Promise.all(writers)
  }
  return written
}

const reviewSchema = z.object({ id: z.string() })

/** Sends one new draft until it is acknowledged, with one key, as a page does that lost its connection. */
async function writeOne(world: World, title: string, isOver: () => boolean = () => false): Promise<Written | undefined> {
  const key = randomUUID()
  while (!isOver()) {
    try {
      const { status, body, text } = await call(world, 'POST', '/api/reviews', { as: 'student', key, body: { title } })
      if (status >= 500) throw new Error(`The server answered ${status}: ${text}`)
      return { id: reviewSchema.parse(body).id, title }
    }
    catch (error) {
      // `fetch` reports a lost connection as a TypeError; anything else is a fault of the server.
      if (!(error instanceof TypeError)) throw error
      await wait(20)
    }
  }
  return undefined
}

const rowsSchema = z.array(z.object({ id: z.string(), title: z.string() }))

/** What of `written` the database at `path` does not hold exactly once, and what SQLite itself finds wrong with it. */
function judge(path: string, written: readonly Written[]): string[] {
  const handle = new SQLite(path)
  try {
    const rows = rowsSchema.parse(handle.prepare('select id, title from reviews').all())
    const titles = new Map(rows.map(row => [row.id, row.title]))
    const lost = written.filter(one => titles.get(one.id) !== one.title).map(one => `Acknowledged and lost: ${one.title}`)
    const twice = rows.length - new Set(rows.map(row => row.title)).size
    const integrity = handle.pragma('integrity_check', { simple: true })
    const strays = handle.prepare('pragma foreign_key_check').all().length
    return [
      ...lost,
      ...twice > 0 ? [`${twice} drafts were made twice by a repeated request`] : [],
      ...integrity === 'ok' ? [] : [`integrity_check: ${String(integrity)}`],
      ...strays === 0 ? [] : [`foreign_key_check: ${strays} rows`],
    ]
  }
  finally {
    handle.close()
  }
}

function databaseOf(world: World): string {
  return world.environment.DATABASE_PATH ?? ''
}
