import { readFile } from 'node:fs/promises'
import { setTimeout as wait } from 'node:timers/promises'
import { z } from 'zod'
import { arrange } from '#tests/support/arrange'
import { call } from '#tests/support/call'
import { FILM } from '#tests/support/path'
import { sendPhoto } from '#tests/support/photo'
import { mismatches, readStore, runJob, storeOf } from '#tests/support/store'
import { makeTemplate } from '#tests/support/template'
import type { World } from '#tests/support/world'
import { startWorld } from '#tests/support/world'
import type { Fault } from '../fault'
import { seededChance } from '../fault'

const KILLS = 100
const SENDERS = 4
const WORLD_INDEX = 47
const SEED = 20_260_519
/** Between two kills, at random: a clip takes about that long from its beginning to its end. */
const LEAST_MS = 200
const MOST_MS = 1500
const MINUTE_MS = 60_000
const HOUR_MS = 60 * MINUTE_MS

export const filmKills: Fault = {
  about: `${KILLS} times kill -9 while film is sent: afterwards no object without its row, no row without its object`,
  async run(tell) {
    await makeTemplate()
    const world = await startWorld({ index: WORLD_INDEX })
    try {
      return await sendThroughKills(world, KILLS, tell)
    }
    finally {
      await world.close()
    }
  },
  async control() {
    await makeTemplate()
    const world = await startWorld({ index: WORLD_INDEX })
    try {
      await storeOf(world).put('film/nobody/stray.mp4', Buffer.from('left behind'), 'video/mp4')
      return await mismatches(world)
    }
    finally {
      await world.close()
    }
  },
}

const begunSchema = z.object({ clip: z.object({ id: z.string() }), parts: z.array(z.object({ url: z.string() })) })

/**
 * Kills the server `kills` times at random moments while clips and photographs are begun, sent, completed and given up, then lets a day go by
 * with its jobs. @returns what does not fit together afterwards.
 */
export async function sendThroughKills(world: World, kills: number, tell: (line: string) => void): Promise<string[]> {
  const chance = seededChance(SEED)
  const film = await readFile(FILM)
  const counts = { begun: 0, completed: 0, givenUp: 0 }
  let isOver = false
  async function sender(): Promise<void> {
    while (!isOver) {
      try {
        await sendOne(world, film, chance(), counts)
      }
      catch (error) {
        // `fetch` reports a lost connection as a TypeError; anything else is a fault of the server.
        if (!(error instanceof TypeError)) throw error
        await wait(20)
      }
    }
  }
  const senders = Promise.all(Array.from({ length: SENDERS }, sender))
  try {
    for (let count = 1; count <= kills; count += 1) {
      await wait(LEAST_MS + chance() * (MOST_MS - LEAST_MS))
      await world.restart({ signal: 'SIGKILL' })
      if (count % 10 === 0) tell(`${count} kills, ${counts.begun} clips begun, ${counts.completed} read, ${counts.givenUp} given up`)
    }
  }
  finally {
    isOver = true
    await senders
  }
  const before = await mismatches(world)
  tell(`${counts.begun} clips begun through ${kills} kills; ${before.length} things did not fit together right after the last`)
  await letADayGoBy(world)
  return [...counts.begun < kills || counts.completed === 0 ? ['Fewer clips than kills, or none read: the load was too thin to say anything.'] : [], ...await mismatches(world), ...await unfinished(world)]
}

/** One clip, and at random a photograph beside it, or giving it up: begun, sent, completed, any of which a kill may cut off. */
async function sendOne(world: World, film: Buffer, chance: number, counts: { begun: number, completed: number, givenUp: number }): Promise<void> {
  const { id: reviewId } = z.object({ id: z.string() }).parse(await ask(world, '/api/reviews', {}))
  if (chance < 0.3) await addPhoto(world, reviewId)
  const { clip, parts } = begunSchema.parse(await ask(world, `/api/reviews/${reviewId}/clips`, { view: 'face_on', fileName: 'swing.mp4', bytes: film.length, contentType: 'video/mp4' }))
  counts.begun += 1
  await fetch(parts[0]?.url ?? '', { method: 'PUT', body: new Uint8Array(film) })
  if (chance > 0.5) {
    await ask(world, `/api/clips/${clip.id}/complete`, {})
    counts.completed += 1
  }
  if (chance > 0.8) {
    await call(world, 'DELETE', `/api/clips/${clip.id}`, { as: 'student' })
    counts.givenUp += 1
  }
}

async function ask(world: World, path: string, body: unknown): Promise<unknown> {
  const answer = await call(world, 'POST', path, { as: 'student', body })
  if (answer.status >= 400) throw new Error(`${path}: ${answer.status} ${answer.text}`)
  return answer.body
}

async function addPhoto(world: World, reviewId: string): Promise<void> {
  const { status, body } = await sendPhoto(world, reviewId)
  if (status !== 201) throw new Error(`A photograph: ${status} ${JSON.stringify(body)}`)
}

/** The jobs as their schedules run them: what was cut short is finished within minutes, what was left goes after a day. */
async function letADayGoBy(world: World): Promise<void> {
  for (let minutes = 3; minutes <= 60; minutes += 3) {
    world.moveClock(minutes * MINUTE_MS)
    await runJob(world, 'film:read')
  }
  world.moveClock(26 * HOUR_MS)
  await runJob(world, 'film:sweep')
}

/** Clips that neither arrived nor went, and uploads of nobody. */
async function unfinished(world: World): Promise<string[]> {
  const waiting = z.number().parse(arrange(world, database => database.prepare('select count(*) from clips where state in (\'uploading\', \'reading\')').pluck().get()))
  const { uploads } = await readStore(world)
  return [
    ...waiting === 0 ? [] : [`${waiting} clips are still being sent or read after a day.`],
    ...uploads.length === 0 ? [] : [`${uploads.length} uploads are still open in the store after a day.`],
  ]
}
