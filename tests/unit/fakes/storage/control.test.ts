import { createHash } from 'node:crypto'
import { once } from 'node:events'
import { createReadStream } from 'node:fs'
import { readdir, readFile } from 'node:fs/promises'
import { request as httpRequest } from 'node:http'
import { join } from 'node:path'
import { PutObjectCommand, S3ServiceException } from '@aws-sdk/client-s3'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { TestStorage } from './harness'
import { BUCKET, control, MIB, openTestStorage, patternBytes, sendRaw, signRaw, textOf } from './harness'

const path = `/${BUCKET}/film.mp4`
let storage: TestStorage

beforeAll(async () => {
  storage = await openTestStorage()
})
afterAll(() => storage.close())
beforeEach(async () => {
  await control(storage.url, 'reset')
})

const put = (body: string | Buffer = 'film') => sendRaw(storage.url, { path, method: 'PUT', body })
const get = () => sendRaw(storage.url, { path })
async function state(): Promise<unknown> {
  return (await control(storage.url, 'state')).json()
}

async function statesUntil(isReached: (seen: string) => boolean): Promise<void> {
  await expect.poll(async () => isReached(JSON.stringify(await state())), { interval: 10, timeout: 3000 }).toBe(true)
}

async function begin(): Promise<string> {
  const begun = await sendRaw(storage.url, { path, method: 'POST', query: [['uploads', '']], headers: { 'content-type': 'video/mp4' } })
  return textOf(await begun.text(), 'UploadId') ?? ''
}

describe('the state', () => {
  it('shows objects, uploads with their parts, and how often each operation was asked for', async () => {
    await put()
    const uploadId = await begin()
    await sendRaw(storage.url, { path, method: 'PUT', query: [['partNumber', '7'], ['uploadId', uploadId]], body: 'part' })
    await get()
    await get()
    // MD5 of "film" and of "part", by md5sum.
    expect(await state()).toMatchObject({
      bucket: BUCKET,
      objects: [{ key: 'film.mp4', bytes: 4, etag: '"bdbd6db1d8cc09a957e86180fda9442a"' }],
      uploads: [{ uploadId, key: 'film.mp4', headers: { 'content-type': 'video/mp4' }, parts: [{ number: 7, bytes: 4, etag: '"f4c9385f1902f7334b00b9b4ecd164de"' }] }],
      requests: { PutObject: 1, CreateMultipartUpload: 1, UploadPart: 1, GetObject: 2 },
      refusals: {},
      hanging: 0,
      failures: [],
    })
  })

  it('is empty after a reset, on disk too', async () => {
    await put()
    await begin()
    await get()
    await control(storage.url, 'reset')
    expect(await state()).toMatchObject({ objects: [], uploads: [], requests: {}, refusals: {}, failures: [] })
    expect((await get()).status).toBe(404)
    for (const folder of ['objects', 'uploads', 'tmp']) expect(await readdir(join(storage.dataDir, folder))).toEqual([])
  })

  it('tells what exists when a door does not', async () => {
    const response = await control(storage.url, 'sessions')
    expect(response.status).toBe(404)
    expect(await response.text()).toContain('POST /__fake__/reset')
  })
})

describe('failing on purpose', () => {
  it('answers with a status so many times, and then serves', async () => {
    await control(storage.url, 'fail', { match: '^PUT /[^?]*film', times: 2, status: 503 })
    expect([(await put()).status, (await put()).status, (await put()).status]).toEqual([503, 503, 200])
    expect(await state()).toMatchObject({ requests: { PutObject: 3 }, refusals: { 'slow-down': 2 }, failures: [] })
  })

  it.each([[500, 'InternalError'], [503, 'SlowDown'], [429, 'SlowDown'], [403, 'AccessDenied'], [404, 'NoSuchKey'], [502, 'InternalError']])(
    'status %i reaches the SDK as %s', async (status, name) => {
      await control(storage.url, 'fail', { match: 'PUT', times: 1, status })
      const refused = await storage.client.send(new PutObjectCommand({ Bucket: BUCKET, Key: 'a', Body: 'a' })).catch((error: unknown) => error)
      expect(refused).toBeInstanceOf(S3ServiceException)
      expect(refused).toMatchObject({ name, $metadata: { httpStatusCode: status } })
    })

  it('leaves other requests alone', async () => {
    await control(storage.url, 'fail', { match: '^DELETE ', times: 1, status: 500 })
    expect([(await put()).status, (await get()).status]).toEqual([200, 200])
  })

  it('hangs without an answer until a reset lets go', async () => {
    await put()
    await control(storage.url, 'fail', { match: '^GET ', times: 1, hang: true })
    let isAnswered = false
    const hanging = get().then(() => 'answered', () => 'cut').finally(() => {
      isAnswered = true
    })
    await statesUntil(seen => seen.includes('"hanging":1'))
    expect((await put()).status).toBe(200)
    expect(isAnswered).toBe(false)
    await control(storage.url, 'reset')
    expect(await hanging).toBe('cut')
  })

  it('destroys the socket, and nothing is stored', async () => {
    await control(storage.url, 'fail', { match: '^PUT ', times: 1, reset: true })
    await expect(put()).rejects.toThrow()
    expect(await state()).toMatchObject({ objects: [], requests: { PutObject: 1 } })
  })

  it('cuts a part in the middle: nothing of it stays, and sent again it is whole', async () => {
    const uploadId = await begin()
    const part = patternBytes(8 * MIB, 1)
    const sendPart = () => sendRaw(storage.url, { path, method: 'PUT', query: [['partNumber', '1'], ['uploadId', uploadId]], body: part })
    await control(storage.url, 'fail', { match: 'partNumber=1', times: 1, reset: true, afterBytes: 4 * MIB })
    await expect(sendPart()).rejects.toThrow()
    await expect.poll(() => readdir(join(storage.dataDir, 'tmp'))).toEqual([])
    expect(await state()).toMatchObject({ uploads: [{ parts: [] }] })
    expect((await sendPart()).headers.get('etag')).toBe(`"${createHash('md5').update(part).digest('hex')}"`)
  })

  it('cuts after the work is done: the client is not told, and the object is there', async () => {
    await control(storage.url, 'fail', { match: '^PUT ', times: 1, reset: true, afterCommit: true })
    await expect(put()).rejects.toThrow()
    expect(await (await get()).text()).toBe('film')
  })

  it.each([
    [{ match: '(', times: 1, status: 500 }, 'match'],
    [{ match: 'PUT', times: 0, status: 500 }, 'times'],
    [{ match: 'PUT', times: 1 }, 'exactly one'],
    [{ match: 'PUT', times: 1, status: 500, hang: true }, 'exactly one'],
    [{ match: 'PUT', times: 1, hang: true, afterBytes: 5 }, 'belong to reset'],
    [{ match: 'PUT', times: 1, statsu: 500 }, 'statsu'],
  ])('refuses the order %j', async (order, word) => {
    const response = await control(storage.url, 'fail', order)
    expect(response.status).toBe(422)
    expect(await response.text()).toContain(word)
  })
})

describe('a client that leaves', () => {
  it('in the middle of a body leaves nothing behind', async () => {
    const signed = signRaw(storage.url, { path, method: 'PUT', payloadHash: 'UNSIGNED-PAYLOAD', headers: { 'content-length': String(2 * MIB) } })
    const leaving = httpRequest(signed.url, { method: 'PUT', headers: signed.headers })
    const left = once(leaving, 'error')
    leaving.write(Buffer.alloc(MIB))
    await expect.poll(() => readdir(join(storage.dataDir, 'tmp'))).toHaveLength(1)
    leaving.destroy(new Error('left'))
    await left
    await expect.poll(() => readdir(join(storage.dataDir, 'tmp'))).toEqual([])
    expect(await state()).toMatchObject({ objects: [], refusals: {} })
    expect((await put()).status).toBe(200)
  })
})

describe('what is on disk', () => {
  it('is readable, and served again by the next run, uploads included', async () => {
    const first = await openTestStorage()
    await sendRaw(first.url, { path, method: 'PUT', body: 'film', headers: { 'content-type': 'video/mp4' } })
    const begun = await sendRaw(first.url, { path, method: 'POST', query: [['uploads', '']] })
    const uploadId = textOf(await begun.text(), 'UploadId') ?? ''
    await sendRaw(first.url, { path, method: 'PUT', query: [['partNumber', '1'], ['uploadId', uploadId]], body: 'part' })
    const names = await readdir(join(first.dataDir, 'objects'))
    const record = names.find(name => name.endsWith('.json')) ?? ''
    expect(JSON.parse(await readFile(join(first.dataDir, 'objects', record), 'utf8'))).toMatchObject({ key: 'film.mp4', headers: { 'content-type': 'video/mp4' } })
    const bodyName = names.find(name => name.endsWith('.body')) ?? ''
    expect(await text(createReadStream(join(first.dataDir, 'objects', bodyName)))).toBe('film')

    const second = await openTestStorage({ dataDir: first.dataDir })
    const again = await sendRaw(second.url, { path })
    expect([await again.text(), again.headers.get('content-type')]).toEqual(['film', 'video/mp4'])
    const parts = await sendRaw(second.url, { path, query: [['uploadId', uploadId]] })
    expect(textOf(await parts.text(), 'PartNumber')).toBe('1')
    await second.close()
    await first.close()
  })
})

async function text(stream: NodeJS.ReadableStream): Promise<string> {
  let all = ''
  for await (const chunk of stream) all += chunk.toString()
  return all
}
