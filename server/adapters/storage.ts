import { createReadStream } from 'node:fs'
import { stat } from 'node:fs/promises'
import {
  AbortMultipartUploadCommand, CompleteMultipartUploadCommand, CreateMultipartUploadCommand, DeleteObjectCommand, GetObjectCommand,
  HeadObjectCommand, ListMultipartUploadsCommand, ListObjectsV2Command, ListPartsCommand, PutObjectCommand, S3Client, UploadPartCommand,
} from '@aws-sdk/client-s3'
import type { ListMultipartUploadsCommandInput, ListObjectsV2CommandInput } from '@aws-sdk/client-s3'
import { getSignedUrl } from '@aws-sdk/s3-request-presigner'

/** A part that the store holds. Numbers count from 1. */
export interface StoredPart {
  number: number
  bytes: number
  etag: string
}

/** An upload that was begun and neither completed nor given up. */
export interface StoredUpload {
  key: string
  uploadId: string
  /** By the store's own clock. */
  begunAtMs: number
}

export interface StoredObject {
  key: string
  bytes: number
  /** By the store's own clock. */
  changedAtMs: number
}

/** The store could not be reached or failed: try again later. */
export class StoreUnavailable extends Error {
  override name = 'StoreUnavailable'
}

/** The store knows no such object or upload. */
export class NotInStore extends Error {
  override name = 'NotInStore'
}

/** Film and pictures. Every method may throw `StoreUnavailable`; keys are ours, never a person's file name. */
export interface FilmStorage {
  createUpload(key: string, contentType: string): Promise<string>
  /** A presigned address that takes one part by PUT for `seconds`. */
  presignPart(key: string, uploadId: string, number: number, seconds: number): Promise<string>
  /** What has arrived, in order of number. @throws NotInStore when the upload was completed or given up. */
  listParts(key: string, uploadId: string): Promise<StoredPart[]>
  completeUpload(key: string, uploadId: string, parts: StoredPart[]): Promise<void>
  /** Giving up what is already gone is no error. */
  abortUpload(key: string, uploadId: string): Promise<void>
  put(key: string, body: Uint8Array, contentType: string): Promise<void>
  /** Stores a file of this machine without holding it in memory; what was at `key` is replaced. */
  putFile(key: string, path: string, contentType: string): Promise<void>
  /** Size of an object in bytes; undefined when there is none. */
  findBytes(key: string): Promise<number | undefined>
  presignGet(key: string, seconds: number): Promise<string>
  remove(key: string): Promise<void>
  /** Uploads that are open under `prefix`, a page of the store at a time, in order of key. */
  uploadPages(prefix: string): AsyncGenerator<StoredUpload[]>
  /** Objects under `prefix`, a page of the store at a time, in order of key (by bytes); at least one page, which may be empty. */
  objectPages(prefix: string): AsyncGenerator<StoredObject[]>
}

interface StorageSettings {
  endpoint: string
  region: string
  bucket: string
  accessKey: string
  secretKey: string
}

/** Any S3-compatible store, through the AWS SDK. */
export function createStorage({ endpoint, region, bucket, accessKey, secretKey }: StorageSettings): FilmStorage {
  const client = new S3Client({
    endpoint,
    region,
    credentials: { accessKeyId: accessKey, secretAccessKey: secretKey },
    forcePathStyle: true,
    // By default the SDK signs the checksum of an empty body into presigned parts, and real stores refuse the upload.
    requestChecksumCalculation: 'WHEN_REQUIRED',
    responseChecksumValidation: 'WHEN_REQUIRED',
    maxAttempts: 3,
  })

  return { ...uploadsIn(client, bucket), ...objectsIn(client, bucket) }
}

function uploadsIn(client: S3Client, Bucket: string) {
  return {
    createUpload: (Key, ContentType) => mapping(async () => {
      const { UploadId } = await client.send(new CreateMultipartUploadCommand({ Bucket, Key, ContentType }))
      if (!UploadId) throw new StoreUnavailable('The store gave no upload id.')
      return UploadId
    }),
    presignPart: (Key, UploadId, PartNumber, expiresIn) =>
      getSignedUrl(client, new UploadPartCommand({ Bucket, Key, UploadId, PartNumber }), { expiresIn }),
    listParts: (Key, UploadId) => mapping(async () => {
      const parts: StoredPart[] = []
      let marker: string | undefined
      do {
        const page = await client.send(new ListPartsCommand({ Bucket, Key, UploadId, PartNumberMarker: marker }))
        for (const part of page.Parts ?? []) {
          parts.push({ number: part.PartNumber ?? 0, bytes: part.Size ?? 0, etag: part.ETag ?? '' })
        }
        marker = page.IsTruncated ? page.NextPartNumberMarker : undefined
      } while (marker)
      return parts
    }),
    completeUpload: (Key, UploadId, parts) => mapping(async () => {
      const Parts = parts.map(part => ({ PartNumber: part.number, ETag: part.etag }))
      await client.send(new CompleteMultipartUploadCommand({ Bucket, Key, UploadId, MultipartUpload: { Parts } }))
    }),
    abortUpload: (Key, UploadId) => mapping(async () => {
      await client.send(new AbortMultipartUploadCommand({ Bucket, Key, UploadId })).catch(ignoreMissing)
    }),
    async* uploadPages(Prefix) {
      let markers: ListMultipartUploadsCommandInput | undefined = { Bucket, Prefix }
      while (markers) {
        const asked: ListMultipartUploadsCommandInput = markers
        const page = await mapping(() => client.send(new ListMultipartUploadsCommand(asked)))
        // What the store gives no time for is never old enough to be given up.
        yield (page.Uploads ?? []).map(upload => ({ key: upload.Key ?? '', uploadId: upload.UploadId ?? '', begunAtMs: upload.Initiated?.getTime() ?? Infinity }))
        markers = page.IsTruncated ? { Bucket, Prefix, KeyMarker: page.NextKeyMarker, UploadIdMarker: page.NextUploadIdMarker } : undefined
      }
    },
  } satisfies Partial<FilmStorage>
}

function objectsIn(client: S3Client, Bucket: string) {
  return {
    put: (Key, Body, ContentType) => mapping(async () => {
      await client.send(new PutObjectCommand({ Bucket, Key, Body, ContentType }))
    }),
    putFile: (Key, path, ContentType) => mapping(async () => {
      const { size: ContentLength } = await stat(path)
      await client.send(new PutObjectCommand({ Bucket, Key, Body: createReadStream(path), ContentLength, ContentType }))
    }),
    findBytes: Key => mapping(async () => {
      const head = await client.send(new HeadObjectCommand({ Bucket, Key })).catch(ignoreMissing)
      return head?.ContentLength
    }),
    presignGet: (Key, expiresIn) => getSignedUrl(client, new GetObjectCommand({ Bucket, Key }), { expiresIn }),
    remove: Key => mapping(async () => {
      await client.send(new DeleteObjectCommand({ Bucket, Key }))
    }),
    async* objectPages(Prefix) {
      let asked: ListObjectsV2CommandInput | undefined = { Bucket, Prefix }
      while (asked) {
        const input: ListObjectsV2CommandInput = asked
        const page = await mapping(() => client.send(new ListObjectsV2Command(input)))
        yield (page.Contents ?? []).map(object => ({ key: object.Key ?? '', bytes: object.Size ?? 0, changedAtMs: object.LastModified?.getTime() ?? Infinity }))
        asked = page.IsTruncated ? { Bucket, Prefix, ContinuationToken: page.NextContinuationToken } : undefined
      }
    },
  } satisfies Partial<FilmStorage>
}

const MISSING = new Set(['NoSuchKey', 'NoSuchUpload', 'NotFound'])

function isMissing(error: unknown): boolean {
  return error instanceof Error && MISSING.has(error.name)
}

function ignoreMissing(error: unknown): undefined {
  if (!isMissing(error)) throw error
  return undefined
}

async function mapping<T>(work: () => Promise<T>): Promise<T> {
  try {
    return await work()
  }
  catch (error) {
    if (isMissing(error)) throw new NotInStore('The store has no such object or upload.', { cause: error })
    if (error instanceof StoreUnavailable) throw error
    throw new StoreUnavailable('The film store did not do its part.', { cause: error })
  }
}
