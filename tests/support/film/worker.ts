import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { buildFilmWorker } from '#server/features/film/reading/build-worker'

export interface BuiltWorker {
  path: string
  remove: () => Promise<void>
}

/** The film reader as the built server has it, in a folder of its own. */
export async function buildWorkerForTest(): Promise<BuiltWorker> {
  const folder = await mkdtemp(join(tmpdir(), 'film-reader-'))
  const path = join(folder, 'film-reader.mjs')
  await buildFilmWorker(path)
  return { path, remove: () => rm(folder, { recursive: true }) }
}
