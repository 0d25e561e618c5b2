import { z } from 'zod'
import type { FilmStorage } from '#server/adapters/storage'
import { createStorage } from '#server/adapters/storage'
import { readSettings } from '#server/settings'
import { openApp } from '#fakes/demo/seed'
import type { JobName } from '#server/features/jobs/jobs'
import { arrange } from './arrange'
import type { World } from './world'

const stateSchema = z.object({
  objects: z.array(z.object({ key: z.string(), bytes: z.number() })),
  uploads: z.array(z.object({ key: z.string(), uploadId: z.string(), parts: z.array(z.unknown()) })),
})

/** What the world's store holds, as it tells it itself. */
export async function readStore(world: World): Promise<z.infer<typeof stateSchema>> {
  const state: unknown = await (await fetch(`${world.standIns.storageUrl}/__fake__/state`)).json()
  return stateSchema.parse(state)
}

/** The store as the server speaks to it, for what a broken-off server would have left there. */
export function storeOf(world: World): FilmStorage {
  return createStorage(readSettings(world.environment, '.output/server/index.mjs').storage)
}

/** Orders the store to fail; see `fakes/storage/failures`. */
export async function failStore(world: World, order: Record<string, unknown>): Promise<void> {
  const answer = await fetch(`${world.standIns.storageUrl}/__fake__/fail`, { method: 'POST', body: JSON.stringify({ times: 1, ...order }) })
  if (!answer.ok) throw new Error(await answer.text())
}

/** Runs a job now, on the world's own data and clock, as its schedule would. */
export async function runJob(world: World, name: JobName): Promise<void> {
  const app = await openApp({ ...world.environment, LOG_LEVEL: 'silent' })
  try {
    await app.jobs.run(name)
  }
  finally {
    await app.close()
  }
}

const clipRows = z.array(z.object({ id: z.string(), state: z.string(), object_key: z.string(), store_upload_id: z.string().nullable() }))
const photoRows = z.array(z.object({ object_key: z.string() }))

/** Each object or upload without its row, and each row without what it names; none when store and rows agree. */
export async function mismatches(world: World): Promise<string[]> {
  const { objects, uploads } = await readStore(world)
  const { clips, photos } = arrange(world, database => ({
    clips: clipRows.parse(database.prepare('select clips.id, state, object_key, store_upload_id from clips left join uploads on clip_id = clips.id').all()),
    photos: photoRows.parse(database.prepare('select object_key from photos').all()),
  }))
  const stored = new Set(objects.map(({ key }) => key))
  const begun = new Set(uploads.map(({ uploadId }) => uploadId))
  const named = new Set([...clips.filter(({ state }) => state === 'accepted' || state === 'reading'), ...photos].map(row => row.object_key))
  const known = new Set(clips.flatMap(({ store_upload_id: id }) => id === null ? [] : [id]))
  return [
    ...[...named].filter(key => !stored.has(key)).map(key => `A row names ${key}, which the store does not have.`),
    ...[...stored].filter(key => !named.has(key)).map(key => `The store has ${key}, which no row names.`),
    ...[...known].filter(id => !begun.has(id)).map(id => `A row names the upload ${id}, which the store does not have.`),
    ...uploads.filter(({ uploadId }) => !known.has(uploadId)).map(({ key }) => `The store has an upload to ${key}, which no row names.`),
  ]
}
