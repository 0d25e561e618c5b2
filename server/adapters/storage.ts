import {
  AbortMultipartUploadCommand, CompleteMultipartUploadCommand, CreateMultipartUploadCommand, DeleteObjectCommand, GetObjectCommand,
  HeadObjectCommand, ListPartsCommand, PutObjectCommand, S3Client, UploadPartCommand,
} from '@aws-sdk/client-s3'
import { getSignedUrl } from '@aws-sdk/s3-request-presigner'

/** A part that the store holds. Numbers count from 1. */
export interface StoredPart {
  number: number
  bytes: number
  etag: string
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
  /** Size of an object in bytes; undefined when there is none. */
  findBytes(key: string): Promise<number | undefined>
  presignGet(key: string, seconds: number): Promise<string>
  remove(key: string): Promise<void>
}

interface StorageSettings {
  endpoint: string
  region: string
  bucket: string
  accessKey: string
  secretKey: string
}

/** Any S3-compatible store, through the AWS SDK. */
export function createStorage({ endpoint, region, bucket: Bucket, accessKey, secretKey }: StorageSettings): FilmStorage {
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
    put: (Key, Body, ContentType) => mapping(async () => {
      await client.send(new PutObjectCommand({ Bucket, Key, Body, ContentType }))
    }),
    findBytes: Key => mapping(async () => {
      const head = await client.send(new HeadObjectCommand({ Bucket, Key })).catch(ignoreMissing)
      return head?.ContentLength
    }),
    presignGet: (Key, expiresIn) => getSignedUrl(client, new GetObjectCommand({ Bucket, Key }), { expiresIn }),
    remove: Key => mapping(async () => {
      await client.send(new DeleteObjectCommand({ Bucket, Key }))
    }),
  }
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
