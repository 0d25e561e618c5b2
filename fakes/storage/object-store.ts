import { openSync } from 'node:fs'
import { mkdir, readdir, rename, rm } from 'node:fs/promises'
import { join } from 'node:path'
import { z } from 'zod'
import { fileNameOfKey, KeyedQueue, newBodySuffix, readJson, writeJson } from './disk'

export const checksumsSchema = z.object({
  crc32: z.string().optional(),
  crc32c: z.string().optional(),
  sha1: z.string().optional(),
  sha256: z.string().optional(),
})

const objectRecordSchema = z.object({
  key: z.string(),
  bytes: z.number().int().nonnegative(),
  /** With its quotes, as it stands in the header. */
  etag: z.string(),
  /** Content-Type and the like, and x-amz-meta-*, in lower case: what a GET gives back. */
  headers: z.record(z.string(), z.string()),
  checksums: checksumsSchema,
  lastModifiedMs: z.number(),
  bodyFile: z.string(),
})

export type ObjectRecord = z.infer<typeof objectRecordSchema>

/** Objects on disk: a body and a readable JSON record beside it; the record's rename is the moment of truth. */
export class ObjectStore {
  readonly #records = new Map<string, ObjectRecord>()
  readonly #queue = new KeyedQueue()

  private constructor(private readonly dataDir: string) {}

  static async open(dataDir: string): Promise<ObjectStore> {
    const store = new ObjectStore(dataDir)
    await mkdir(store.#folder, { recursive: true })
    const names = await readdir(store.#folder)
    for (const name of names.filter(candidate => candidate.endsWith('.json'))) {
      const record = objectRecordSchema.parse(await readJson(join(store.#folder, name)))
      store.#records.set(record.key, record)
    }
    const kept = new Set([...store.#records.values()].map(record => record.bodyFile))
    for (const name of names.filter(candidate => candidate.endsWith('.body') && !kept.has(candidate))) {
      await rm(join(store.#folder, name))
    }
    return store
  }

  get #folder(): string {
    return join(this.dataDir, 'objects')
  }

  find(key: string): ObjectRecord | undefined {
    return this.#records.get(key)
  }

  /** In the service's order, which is that of the keys' UTF-8 bytes. */
  list(): ObjectRecord[] {
    return [...this.#records.values()].sort((a, b) => compareKeys(a.key, b.key))
  }

  /** Opens the body now, in the same turn as the record was found, before a replacement can unlink it. */
  openBody(record: ObjectRecord): number {
    return openSync(join(this.#folder, record.bodyFile), 'r')
  }

  /** Makes the bytes at `tempPath` the object. Readers see the old one or the new one, whole. */
  async commit(tempPath: string, fresh: Omit<ObjectRecord, 'bodyFile'>): Promise<void> {
    await this.#queue.run(fresh.key, async () => {
      const name = fileNameOfKey(fresh.key)
      const record = { ...fresh, bodyFile: `${name}.${newBodySuffix()}.body` }
      await rename(tempPath, join(this.#folder, record.bodyFile))
      await writeJson(this.dataDir, join(this.#folder, `${name}.json`), record)
      const replaced = this.#records.get(fresh.key)
      this.#records.set(fresh.key, record)
      if (replaced) await rm(join(this.#folder, replaced.bodyFile), { force: true })
    })
  }

  /** Deleting what is not there is no error, as in the service. */
  async delete(key: string): Promise<void> {
    await this.#queue.run(key, async () => {
      const record = this.#records.get(key)
      if (!record) return
      await rm(join(this.#folder, `${fileNameOfKey(key)}.json`), { force: true })
      this.#records.delete(key)
      await rm(join(this.#folder, record.bodyFile), { force: true })
    })
  }

  async clear(): Promise<void> {
    for (const key of [...this.#records.keys()]) await this.delete(key)
  }
}

/** Order of UTF-8 bytes; JavaScript's own order differs beyond the basic plane. */
export function compareKeys(a: string, b: string): number {
  return Buffer.compare(Buffer.from(a, 'utf8'), Buffer.from(b, 'utf8'))
}
