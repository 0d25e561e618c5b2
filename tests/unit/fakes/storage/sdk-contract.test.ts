import { createHash } from 'node:crypto'
import { Readable } from 'node:stream'
import {
  AbortMultipartUploadCommand, CompleteMultipartUploadCommand, CreateMultipartUploadCommand, DeleteObjectCommand, GetObjectCommand,
  HeadBucketCommand, HeadObjectCommand, ListMultipartUploadsCommand, ListObjectsV2Command, ListPartsCommand, PutObjectCommand, UploadPartCommand,
} from '@aws-sdk/client-s3'
import { getSignedUrl } from '@aws-sdk/s3-request-presigner'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { createChecksum } from '#fakes/storage/checksums'
import type { TestStorage } from './harness'
import { BUCKET, control, createClient, md5Hex, MIB, openTestStorage, patternBytes } from './harness'

const Bucket = BUCKET
let storage: TestStorage

beforeAll(async () => {
  storage = await openTestStorage()
})
afterAll(() => storage.close())
beforeEach(async () => {
  await control(storage.url, 'reset')
})

async function put(key: string, body: string | Buffer, contentType?: string) {
  return storage.client.send(new PutObjectCommand({ Bucket, Key: key, Body: body, ContentType: contentType }))
}

async function read(key: string, range?: string): Promise<Buffer> {
  const { Body } = await storage.client.send(new GetObjectCommand({ Bucket, Key: key, Range: range }))
  return Buffer.from(await Body?.transformToByteArray() ?? [])
}

async function begin(key: string, contentType = 'video/mp4'): Promise<string> {
  const { UploadId = '' } = await storage.client.send(new CreateMultipartUploadCommand({
    Bucket, Key: key, ContentType: contentType, Metadata: { view: 'face-on' },
  }))
  return UploadId
}

/** Sends a part as a page does: by a presigned address, with nothing but the bytes. */
async function sendPart(key: string, uploadId: string, number: number, bytes: Buffer): Promise<string> {
  const url = await getSignedUrl(storage.client, new UploadPartCommand({ Bucket, Key: key, UploadId: uploadId, PartNumber: number }), { expiresIn: 60 })
  const response = await fetch(url, { method: 'PUT', body: new Uint8Array(bytes) })
  expect(response.status).toBe(200)
  return response.headers.get('etag') ?? ''
}

async function complete(key: string, uploadId: string, etags: [number: number, etag: string][]) {
  return storage.client.send(new CompleteMultipartUploadCommand({
    Bucket, Key: key, UploadId: uploadId, MultipartUpload: { Parts: etags.map(([PartNumber, ETag]) => ({ PartNumber, ETag })) },
  }))
}

describe('objects through the real SDK', () => {
  it('puts, heads, reads and deletes, with type, metadata and the MD5 as entity tag', async () => {
    const body = patternBytes(200_000, 1)
    const answer = await storage.client.send(new PutObjectCommand({
      Bucket, Key: 'film/a b+c/ä=&?.mp4', Body: body, ContentType: 'video/mp4', CacheControl: 'private', Metadata: { view: 'down-the-line' },
    }))
    expect(answer.ETag).toBe(`"${md5Hex(body)}"`)
    const head = await storage.client.send(new HeadObjectCommand({ Bucket, Key: 'film/a b+c/ä=&?.mp4' }))
    expect(head).toMatchObject({
      ContentLength: 200_000, ContentType: 'video/mp4', CacheControl: 'private', ETag: answer.ETag, Metadata: { view: 'down-the-line' }, AcceptRanges: 'bytes',
    })
    expect(await read('film/a b+c/ä=&?.mp4')).toEqual(body)
    await storage.client.send(new DeleteObjectCommand({ Bucket, Key: 'film/a b+c/ä=&?.mp4' }))
    await storage.client.send(new DeleteObjectCommand({ Bucket, Key: 'film/a b+c/ä=&?.mp4' }))
    await expect(storage.client.send(new HeadObjectCommand({ Bucket, Key: 'film/a b+c/ä=&?.mp4' }))).rejects.toMatchObject({ name: 'NotFound' })
  })

  it.each(['a//b/../c', '..', 'a/', '%2e%2e', 'a\nb', '\u{1F3CC} swing', '!\'()*', 'x'.repeat(1024)])('keeps the key %j apart from others', async (key) => {
    await put(key, `body of ${key}`)
    await put(`${key.slice(0, 1000)}2`, 'another')
    expect((await read(key)).toString('utf8')).toBe(`body of ${key}`)
    const { Contents = [] } = await storage.client.send(new ListObjectsV2Command({ Bucket, Prefix: key }))
    expect(Contents.map(object => object.Key)).toContain(key)
  })

  it('takes a body as a stream of known length, asking for it only once the signature is believed', async () => {
    const body = patternBytes(3 * MIB, 2)
    await storage.client.send(new PutObjectCommand({ Bucket, Key: 'stream', Body: Readable.from([body]), ContentLength: body.length }))
    expect(md5Hex(await read('stream'))).toBe(md5Hex(body))
  })

  it('replaces an object whole: a reader that began on the old one ends on it', async () => {
    const old = patternBytes(8 * MIB, 3)
    await put('film', old)
    const { Body } = await storage.client.send(new GetObjectCommand({ Bucket, Key: 'film' }))
    await put('film', 'new')
    expect(md5Hex(Buffer.from(await Body?.transformToByteArray() ?? []))).toBe(md5Hex(old))
    expect((await read('film')).toString()).toBe('new')
  })

  it('refuses to overwrite when asked not to', async () => {
    const once = () => storage.client.send(new PutObjectCommand({ Bucket, Key: 'once', Body: 'x', IfNoneMatch: '*' }))
    await once()
    await expect(once()).rejects.toMatchObject({ name: 'PreconditionFailed', $metadata: { httpStatusCode: 412 } })
  })

  it('lists by prefix and page, in the order of UTF-8 bytes', async () => {
    const keys = ['b/1', 'a/2', 'a/10', 'a/\uFFFD', 'a/\u{1F3CC}']
    for (const key of keys) await put(key, key)
    const seen: string[] = []
    let ContinuationToken: string | undefined
    do {
      const page = await storage.client.send(new ListObjectsV2Command({ Bucket, Prefix: 'a/', MaxKeys: 3, ContinuationToken }))
      expect(page.KeyCount).toBeLessThanOrEqual(3)
      seen.push(...(page.Contents ?? []).map(object => `${object.Key} ${object.Size} ${object.ETag}`))
      ContinuationToken = page.NextContinuationToken
    } while (ContinuationToken !== undefined)
    // JavaScript's own order would put U+1F3CC, a surrogate pair, before U+FFFD.
    expect(seen).toEqual(['a/10', 'a/2', 'a/\uFFFD', 'a/\u{1F3CC}'].map(key => `${key} ${Buffer.byteLength(key)} "${md5Hex(key)}"`))
  })

  it('knows its bucket and no other', async () => {
    await storage.client.send(new HeadBucketCommand({ Bucket }))
    await expect(storage.client.send(new HeadBucketCommand({ Bucket: 'another' }))).rejects.toMatchObject({ name: 'NotFound' })
  })
})

describe('reading in parts', () => {
  const film = patternBytes(1234, 4)

  beforeEach(async () => {
    await put('film', film, 'video/mp4')
  })

  it.each([
    ['bytes=0-499', 'bytes 0-499/1234', [0, 500]],
    ['bytes=500-999', 'bytes 500-999/1234', [500, 1000]],
    ['bytes=-500', 'bytes 734-1233/1234', [734, 1234]],
    ['bytes=1233-', 'bytes 1233-1233/1234', [1233, 1234]],
    ['bytes=1000-9999', 'bytes 1000-1233/1234', [1000, 1234]],
  ] as const)('%s (RFC 9110, section 14)', async (Range, contentRange, [start, end]) => {
    const answer = await storage.client.send(new GetObjectCommand({ Bucket, Key: 'film', Range }))
    expect(answer).toMatchObject({ ContentRange: contentRange, ContentLength: end - start, $metadata: { httpStatusCode: 206 } })
    expect(Buffer.from(await answer.Body?.transformToByteArray() ?? [])).toEqual(film.subarray(start, end))
  })

  it('answers several ranges, and nonsense, with the whole', async () => {
    for (const Range of ['bytes=0-0,-1', 'frames=1-2']) {
      const answer = await storage.client.send(new GetObjectCommand({ Bucket, Key: 'film', Range }))
      expect(answer.$metadata.httpStatusCode).toBe(200)
      expect(Buffer.from(await answer.Body?.transformToByteArray() ?? [])).toEqual(film)
    }
  })

  it('tells the length when a range lies outside', async () => {
    const url = await getSignedUrl(storage.client, new GetObjectCommand({ Bucket, Key: 'film' }))
    const response = await fetch(url, { headers: { Range: 'bytes=1234-' } })
    expect([response.status, response.headers.get('content-range')]).toEqual([416, 'bytes */1234'])
  })

  it('obeys If-Range, If-None-Match and If-Match as a browser sends them', async () => {
    const url = await getSignedUrl(storage.client, new GetObjectCommand({ Bucket, Key: 'film' }))
    const etag = `"${md5Hex(film)}"`
    const statusOf = async (headers: Record<string, string>) => (await fetch(url, { headers })).status
    expect(await statusOf({ 'Range': 'bytes=0-1', 'If-Range': etag })).toBe(206)
    expect(await statusOf({ 'Range': 'bytes=0-1', 'If-Range': '"old"' })).toBe(200)
    expect(await statusOf({ 'If-None-Match': etag })).toBe(304)
    expect(await statusOf({ 'If-None-Match': '"old"' })).toBe(200)
    expect(await statusOf({ 'If-Match': etag })).toBe(200)
    const lastModified = (await fetch(url)).headers.get('last-modified') ?? ''
    expect(await statusOf({ 'If-Modified-Since': lastModified })).toBe(304)
    expect(await statusOf({ 'If-Unmodified-Since': 'Mon, 01 Jan 2001 00:00:00 GMT' })).toBe(412)
  })

  it('lets a signed address say type and name', async () => {
    const url = await getSignedUrl(storage.client, new GetObjectCommand({
      Bucket, Key: 'film', ResponseContentType: 'application/octet-stream', ResponseContentDisposition: 'attachment; filename="swing.mp4"',
    }), { expiresIn: 60 })
    const { headers } = await fetch(url)
    expect([headers.get('content-type'), headers.get('content-disposition')]).toEqual(['application/octet-stream', 'attachment; filename="swing.mp4"'])
    const other = await fetch(url.replace('swing.mp4', 'other.mp4'))
    expect(other.status).toBe(403)
  })
})

describe('uploads in parts', () => {
  const pieces = [patternBytes(5 * MIB, 5), patternBytes(5 * MIB + 1, 6), patternBytes(70_001, 7)]

  it('puts three presigned parts together, in whatever order they came', async () => {
    const uploadId = await begin('clip.mp4')
    const etags: [number, string][] = []
    for (const number of [3, 1, 2]) etags.push([number, await sendPart('clip.mp4', uploadId, number, pieces[number - 1] ?? Buffer.alloc(0))])
    etags.sort(([a], [b]) => a - b)
    expect(etags.map(([, etag]) => etag)).toEqual(pieces.map(piece => `"${md5Hex(piece)}"`))

    const { ETag, Key } = await complete('clip.mp4', uploadId, etags)
    // Amazon S3 User Guide, "Checking object integrity": MD5 of the parts' binary MD5s, a dash, the number of parts.
    const digests = Buffer.concat(pieces.map(piece => createHash('md5').update(piece).digest()))
    expect([Key, ETag]).toEqual(['clip.mp4', `"${md5Hex(digests)}-3"`])
    expect(md5Hex(await read('clip.mp4'))).toBe(md5Hex(Buffer.concat(pieces)))
    const head = await storage.client.send(new HeadObjectCommand({ Bucket, Key: 'clip.mp4' }))
    expect(head).toMatchObject({ ETag, ContentType: 'video/mp4', Metadata: { view: 'face-on' }, ContentLength: 10 * MIB + 70_002 })
    await expect(complete('clip.mp4', uploadId, etags)).rejects.toMatchObject({ name: 'NoSuchUpload' })
  })

  it('resumes from what the store has, page by page, and takes a part sent again in place of the first', async () => {
    const uploadId = await begin('clip.mp4')
    await sendPart('clip.mp4', uploadId, 1, pieces[0] ?? Buffer.alloc(0))
    await sendPart('clip.mp4', uploadId, 3, Buffer.from('to be replaced'))
    await sendPart('clip.mp4', uploadId, 3, pieces[2] ?? Buffer.alloc(0))
    const first = await storage.client.send(new ListPartsCommand({ Bucket, Key: 'clip.mp4', UploadId: uploadId, MaxParts: 1 }))
    expect(first).toMatchObject({ IsTruncated: true, NextPartNumberMarker: '1', Parts: [{ PartNumber: 1, Size: 5 * MIB }] })
    const second = await storage.client.send(new ListPartsCommand({
      Bucket, Key: 'clip.mp4', UploadId: uploadId, PartNumberMarker: first.NextPartNumberMarker,
    }))
    expect(second).toMatchObject({ IsTruncated: false, Parts: [{ PartNumber: 3, Size: 70_001, ETag: `"${md5Hex(pieces[2] ?? '')}"` }] })

    const missing = await sendPart('clip.mp4', uploadId, 2, pieces[1] ?? Buffer.alloc(0))
    const etags: [number, string][] = [[2, missing]]
    for (const { PartNumber = 0, ETag = '' } of [...first.Parts ?? [], ...second.Parts ?? []]) etags.push([PartNumber, ETag])
    await complete('clip.mp4', uploadId, etags.sort(([a], [b]) => a - b))
    expect(md5Hex(await read('clip.mp4'))).toBe(md5Hex(Buffer.concat(pieces)))
  })

  it('lists what was begun, page by page, and forgets what is aborted', async () => {
    const ids = [await begin('a.mp4'), await begin('b.mp4'), await begin('b.mp4')]
    const first = await storage.client.send(new ListMultipartUploadsCommand({ Bucket, MaxUploads: 2 }))
    const second = await storage.client.send(new ListMultipartUploadsCommand({
      Bucket, KeyMarker: first.NextKeyMarker, UploadIdMarker: first.NextUploadIdMarker,
    }))
    expect([first.IsTruncated, second.IsTruncated]).toEqual([true, false])
    const listed = [...first.Uploads ?? [], ...second.Uploads ?? []]
    expect(new Set(listed.map(upload => upload.UploadId))).toEqual(new Set(ids))
    expect(listed.every(upload => upload.Initiated instanceof Date)).toBe(true)
    for (const { Key, UploadId } of listed) await storage.client.send(new AbortMultipartUploadCommand({ Bucket, Key, UploadId }))
    expect((await storage.client.send(new ListMultipartUploadsCommand({ Bucket }))).Uploads).toBeUndefined()
    await expect(storage.client.send(new ListPartsCommand({ Bucket, Key: 'a.mp4', UploadId: ids[0] }))).rejects.toMatchObject({ name: 'NoSuchUpload' })
  })

  it('lets one of two completions at once win', async () => {
    const uploadId = await begin('clip.mp4')
    const etag = await sendPart('clip.mp4', uploadId, 1, pieces[2] ?? Buffer.alloc(0))
    const outcomes = await Promise.allSettled([complete('clip.mp4', uploadId, [[1, etag]]), complete('clip.mp4', uploadId, [[1, etag]])])
    expect(outcomes.map(outcome => outcome.status).sort()).toEqual(['fulfilled', 'rejected'])
    expect(outcomes.find(outcome => outcome.status === 'rejected')).toMatchObject({ reason: { name: 'NoSuchUpload' } })
  })
})

describe('checksums through the real SDK', () => {
  it.each([['CRC32', 'crc32'], ['CRC32C', 'crc32c'], ['SHA1', 'sha1'], ['SHA256', 'sha256']] as const)('verifies %s sent in a header and gives it back when asked', async (ChecksumAlgorithm, algorithm) => {
    await storage.client.send(new PutObjectCommand({ Bucket, Key: 'summed', Body: 'twelve bytes', ChecksumAlgorithm }))
    const head = await storage.client.send(new HeadObjectCommand({ Bucket, Key: 'summed', ChecksumMode: 'ENABLED' }))
    const checksum = createChecksum(algorithm)
    checksum.update(Buffer.from('twelve bytes'))
    expect(head[`Checksum${ChecksumAlgorithm}`]).toBe(checksum.digestBase64())
  })

  it('[house.fakes] refuses a presigned part that carries the checksum of an empty body, the default of the SDK', async () => {
    const defaults = createClient(storage.url, { requestChecksumCalculation: 'WHEN_SUPPORTED' })
    const uploadId = await begin('clip.mp4')
    const url = await getSignedUrl(defaults, new UploadPartCommand({ Bucket, Key: 'clip.mp4', UploadId: uploadId, PartNumber: 1 }))
    defaults.destroy()
    expect(url).toContain('x-amz-checksum-crc32=AAAAAA%3D%3D')
    const refused = await fetch(url, { method: 'PUT', body: 'film' })
    expect([refused.status, refused.headers.get('x-fake-refusal')]).toEqual([400, 'checksum-mismatch'])
    expect(await refused.text()).toContain('<Code>BadDigest</Code>')
    // The control: the same address does take the empty body that it was made for.
    expect((await fetch(url, { method: 'PUT', body: '' })).status).toBe(200)
  })
})
