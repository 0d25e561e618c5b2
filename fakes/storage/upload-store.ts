import { randomBytes } from 'node:crypto'
import { mkdir, readdir, rename, rm } from 'node:fs/promises'
import { join } from 'node:path'
import { z } from 'zod'
import { KeyedQueue, newBodySuffix, readJson, writeJson } from './disk'
import { checksumsSchema, compareKeys } from './object-store'
import { Refusal } from './refusals'

const uploadRecordSchema = z.object({
  uploadId: z.string(),
  key: z.string(),
  headers: z.record(z.string(), z.string()),
  initiatedAtMs: z.number(),
})

const partRecordSchema = z.object({
  number: z.number().int(),
  bytes: z.number().int().nonnegative(),
  etag: z.string(),
  checksums: checksumsSchema,
  lastModifiedMs: z.number(),
  bodyFile: z.string(),
})

export type UploadRecord = z.infer<typeof uploadRecordSchema>
export type PartRecord = z.infer<typeof partRecordSchema>

interface OpenUpload {
  record: UploadRecord
  parts: Map<number, PartRecord>
}

/** Uploads in parts that are neither completed nor aborted: one folder each, a body and a JSON record per part. */
export class UploadStore {
  readonly #uploads = new Map<string, OpenUpload>()
  readonly #queue = new KeyedQueue()

  private constructor(private readonly dataDir: string) {}

  static async open(dataDir: string): Promise<UploadStore> {
    const store = new UploadStore(dataDir)
    await mkdir(store.#folder(), { recursive: true })
    for (const uploadId of await readdir(store.#folder())) await store.#load(uploadId)
    return store
  }

  #folder(uploadId = ''): string {
    return join(this.dataDir, 'uploads', uploadId)
  }

  async #load(uploadId: string): Promise<void> {
    const names = await readdir(this.#folder(uploadId))
    // Killed between making the folder and writing the record: nobody was told of this upload.
    if (!names.includes('upload.json')) return rm(this.#folder(uploadId), { recursive: true })
    const record = uploadRecordSchema.parse(await readJson(join(this.#folder(uploadId), 'upload.json')))
    const parts = new Map<number, PartRecord>()
    for (const name of names.filter(candidate => candidate.startsWith('part-') && candidate.endsWith('.json'))) {
      const part = partRecordSchema.parse(await readJson(join(this.#folder(uploadId), name)))
      parts.set(part.number, part)
    }
    this.#uploads.set(uploadId, { record, parts })
  }

  /** Ids begin with the time of their making, so that the order of ids is the order of beginnings. */
  async insert(fresh: Omit<UploadRecord, 'uploadId'>): Promise<UploadRecord> {
    const uploadId = fresh.initiatedAtMs.toString(16).padStart(12, '0') + randomBytes(12).toString('hex')
    const record = { uploadId, ...fresh }
    await writeJson(this.dataDir, join(this.#folder(uploadId), 'upload.json'), record)
    this.#uploads.set(uploadId, { record, parts: new Map() })
    return record
  }

  /** Refuses an id that is unknown, or known for another key. */
  get(uploadId: string, key: string): UploadRecord {
    return this.#get(uploadId, key).record
  }

  #get(uploadId: string, key: string): OpenUpload {
    const upload = this.#uploads.get(uploadId)
    if (!upload || upload.record.key !== key) throw new Refusal('no-such-upload', '', { UploadId: uploadId })
    return upload
  }

  /** By number, ascending. */
  listParts(uploadId: string, key: string): PartRecord[] {
    return [...this.#get(uploadId, key).parts.values()].sort((a, b) => a.number - b.number)
  }

  /** By key, then by beginning. */
  list(): UploadRecord[] {
    return [...this.#uploads.values()].map(upload => upload.record)
      .sort((a, b) => compareKeys(a.key, b.key) || compareKeys(a.uploadId, b.uploadId))
  }

  partPath(uploadId: string, part: PartRecord): string {
    return join(this.#folder(uploadId), part.bodyFile)
  }

  /** Makes the bytes at `tempPath` the part, in place of an earlier one of its number. */
  async commitPart(upload: UploadRecord, tempPath: string, fresh: Omit<PartRecord, 'bodyFile'>): Promise<void> {
    const { uploadId, key } = upload
    await this.exclusively(uploadId, async () => {
      // Asked again: the upload may have been completed or aborted while the bytes came in.
      const { parts } = this.#get(uploadId, key)
      const name = `part-${String(fresh.number).padStart(5, '0')}`
      const part = { ...fresh, bodyFile: `${name}.${newBodySuffix()}.body` }
      await rename(tempPath, this.partPath(uploadId, part))
      await writeJson(this.dataDir, join(this.#folder(uploadId), `${name}.json`), part)
      const replaced = parts.get(part.number)
      parts.set(part.number, part)
      if (replaced) await rm(this.partPath(uploadId, replaced), { force: true })
    })
  }

  /** Runs a job while no part of the upload is committed and nobody else completes or aborts it. */
  async exclusively<T>(uploadId: string, job: () => Promise<T>): Promise<T> {
    return this.#queue.run(uploadId, job)
  }

  /** Forgets an upload and its parts. Call it inside `exclusively`. */
  async remove(uploadId: string): Promise<void> {
    this.#uploads.delete(uploadId)
    await rm(this.#folder(uploadId), { recursive: true, force: true })
  }

  async clear(): Promise<void> {
    for (const uploadId of [...this.#uploads.keys()]) await this.exclusively(uploadId, () => this.remove(uploadId))
  }
}
