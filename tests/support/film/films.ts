import { readFileSync } from 'node:fs'
import { z } from 'zod'

const truthSchema = z.object({
  source: z.string(),
  films: z.record(z.string(), z.object({ timeBase: z.number(), ticks: z.array(z.number()) })),
})

function made(name: string): URL {
  return new URL(`./made/${name}`, import.meta.url)
}

/** One of the films of `make.ts`. */
export function readMadeFilm(name: string): Buffer {
  return readFileSync(made(name))
}

/** Frame times of the films as ffprobe shows them, in ticks of each film's own time base. */
export function readTruth(name: string): { timeBase: number, ticks: number[] } {
  const found = truthSchema.parse(JSON.parse(readFileSync(made('truth.json'), 'utf8'))).films[name]
  if (!found)
    throw new Error(`No truth is noted for ${name}; run tests/support/film/make.ts.`)
  return found
}
