import { createHash, randomBytes } from 'node:crypto'
import { mkdir, readFile, rename, rm, writeFile } from 'node:fs/promises'
import { dirname, join } from 'node:path'

/** A place for bytes that are still coming in; renaming out of it stays on one file system, hence atomic. */
export function newTempPath(dataDir: string): string {
  return join(dataDir, 'tmp', randomBytes(12).toString('hex'))
}

/** Writes readable JSON so that a reader finds the old or the new text, never half of one. */
export async function writeJson(dataDir: string, path: string, value: unknown): Promise<void> {
  const temp = newTempPath(dataDir)
  await writeFile(temp, `${JSON.stringify(value, null, 2)}\n`)
  await mkdir(dirname(path), { recursive: true })
  await rename(temp, path)
}

export async function readJson(path: string): Promise<unknown> {
  const parsed: unknown = JSON.parse(await readFile(path, 'utf8'))
  return parsed
}

/** What was half received when the last run ended is nobody's. */
export async function emptyTempFolder(dataDir: string): Promise<void> {
  await rm(join(dataDir, 'tmp'), { recursive: true, force: true })
  await mkdir(join(dataDir, 'tmp'), { recursive: true })
}

/**
 * A file name for a key: readable at the front, unique by the hash at the end, and never longer than a file system
 * takes, although keys may have 1024 bytes.
 */
export function fileNameOfKey(key: string): string {
  const hash = createHash('sha256').update(key).digest('hex').slice(0, 16)
  return `${encodeURIComponent(key).slice(0, 120)}-${hash}`
}

/** A suffix that makes every body a file of its own: the one being read is never the one being written. */
export function newBodySuffix(): string {
  return randomBytes(6).toString('hex')
}

/** Runs jobs of one name one after the other, jobs of different names side by side. */
export class KeyedQueue {
  readonly #tails = new Map<string, Promise<unknown>>()

  async run<T>(name: string, job: () => Promise<T>): Promise<T> {
    const before = this.#tails.get(name) ?? Promise.resolve()
    const result = before.then(job)
    const tail = result.catch(() => undefined)
    this.#tails.set(name, tail)
    try {
      return await result
    }
    finally {
      if (this.#tails.get(name) === tail) this.#tails.delete(name)
    }
  }
}
