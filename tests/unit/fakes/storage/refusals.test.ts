import { rm } from 'node:fs/promises'
import { request as httpRequest } from 'node:http'
import { join } from 'node:path'
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { RefusalName } from '#fakes/storage/refusals'
import { REFUSALS } from '#fakes/storage/refusals'
import type { RawRequest, TestStorage } from './harness'
import { ACCESS_KEY, BUCKET, control, md5Hex, MIB, openTestStorage, patternBytes, REGION, sendRaw, signRaw, textOf } from './harness'

const MINUTE_MS = 60_000
const path = `/${BUCKET}/film.mp4`
let storage: TestStorage

beforeAll(async () => {
  storage = await openTestStorage({ allowedOrigins: ['http://127.0.0.1:3000'] })
})
afterAll(() => storage.close())
beforeEach(async () => {
  await control(storage.url, 'reset')
})

function send(raw: Partial<RawRequest> = {}): Promise<Response> {
  return sendRaw(storage.url, { path, ...raw })
}

/** Signed well, then spoiled in its headers or address. */
function sendSpoiled(raw: Partial<RawRequest>, spoil: { headers?: Record<string, string>, url?: (url: string) => string }): Promise<Response> {
  const { url, method, headers } = signRaw(storage.url, { path, ...raw })
  return fetch(spoil.url?.(url) ?? url, { method, headers: { ...headers, ...spoil.headers } })
}

const put = (headers: Record<string, string>, body = 'film') => send({ method: 'PUT', body, headers })

async function begin(): Promise<string> {
  const response = await send({ method: 'POST', query: [['uploads', '']] })
  return textOf(await response.text(), 'UploadId') ?? ''
}

async function sendPart(uploadId: string, number: string, body: Buffer | string): Promise<Response> {
  return send({ method: 'PUT', query: [['partNumber', number], ['uploadId', uploadId]], body })
}

function complete(uploadId: string, parts: [number: number, etag: string][]): Promise<Response> {
  const body = `<CompleteMultipartUpload>${parts.map(([number, etag]) =>
    `<Part><PartNumber>${number}</PartNumber><ETag>${etag}</ETag></Part>`).join('')}</CompleteMultipartUpload>`
  return send({ method: 'POST', query: [['uploadId', uploadId]], body })
}

/** What fetch will not send: a body without its length, or a length that is not the body's. Resolves at the headers. */
async function sendLoose(raw: RawRequest, headers: Record<string, string>, body: string): Promise<Response> {
  const signed = signRaw(storage.url, raw)
  return new Promise((resolve, reject) => {
    const request = httpRequest(signed.url, { method: signed.method, headers: { ...signed.headers, ...headers } }, (incoming) => {
      const chunks: Buffer[] = []
      incoming.on('data', (chunk: Buffer) => chunks.push(chunk))
      incoming.on('end', () => {
        request.destroy()
        const refusal = incoming.headers['x-fake-refusal']
        resolve(new Response(Buffer.concat(chunks), {
          status: incoming.statusCode ?? 0, headers: typeof refusal === 'string' ? { 'x-fake-refusal': refusal } : {},
        }))
      })
    })
    request.on('error', reject)
    request.write(body)
    if (headers['Transfer-Encoding']) request.end()
  })
}

interface Row {
  status: number
  code: string
  provoke: () => Promise<Response>
}

/** One way to provoke each row, with the status and code that the real service gives (API Reference, "Error responses"). */
const ROWS: Record<RefusalName, Row> = {
  'missing-authentication': { status: 403, code: 'AccessDenied', provoke: () => fetch(`${storage.url}${path}`) },
  'two-authentications': { status: 400, code: 'InvalidArgument', provoke: () =>
    sendSpoiled({ expiresS: '60' }, { headers: { Authorization: 'AWS4-HMAC-SHA256 Credential=x' } }) },
  'unsupported-mechanism': { status: 400, code: 'InvalidRequest', provoke: () => sendSpoiled({}, { headers: { Authorization: `AWS ${ACCESS_KEY}:abc=` } }) },
  'malformed-authorization': { status: 400, code: 'AuthorizationHeaderMalformed', provoke: () =>
    sendSpoiled({}, { headers: { Authorization: `AWS4-HMAC-SHA256 Credential=${ACCESS_KEY}/20250101/${REGION}/s3/aws4_request` } }) },
  'wrong-header-scope': { status: 400, code: 'AuthorizationHeaderMalformed', provoke: () =>
    send({ scope: `${new Date().toISOString().slice(0, 10).replaceAll('-', '')}/us-west-2/s3/aws4_request` }) },
  'malformed-query-authorization': { status: 400, code: 'AuthorizationQueryParametersError', provoke: () =>
    sendSpoiled({ expiresS: '60' }, { url: url => url.replace(/&X-Amz-Signature=\w+/, '') }) },
  'wrong-query-scope': { status: 400, code: 'AuthorizationQueryParametersError', provoke: () => send({ expiresS: '60', scope: `20130524/${REGION}/s3/aws4_request` }) },
  'expires-out-of-range': { status: 400, code: 'AuthorizationQueryParametersError', provoke: () => send({ expiresS: '604801' }) },
  'unknown-access-key': { status: 403, code: 'InvalidAccessKeyId', provoke: () => send({ accessKey: 'SOMEBODYELSE' }) },
  'session-token': { status: 400, code: 'InvalidToken', provoke: () => send({ headers: { 'x-amz-security-token': 'token' } }) },
  'wrong-signature': { status: 403, code: 'SignatureDoesNotMatch', provoke: () => send({ secretKey: 'guessed' }) },
  'request-expired': { status: 403, code: 'AccessDenied', provoke: () => send({ expiresS: '60', signedAtMs: Date.now() - MINUTE_MS }) },
  'not-yet-valid': { status: 403, code: 'AccessDenied', provoke: () => send({ expiresS: '60', signedAtMs: Date.now() + 16 * MINUTE_MS }) },
  'clock-skew': { status: 403, code: 'RequestTimeTooSkewed', provoke: () => send({ signedAtMs: Date.now() - 16 * MINUTE_MS }) },
  'missing-date': { status: 403, code: 'AccessDenied', provoke: () => sendSpoiled({}, { headers: { 'x-amz-date': 'yesterday' } }) },
  'headers-not-signed': { status: 403, code: 'AccessDenied', provoke: () =>
    sendSpoiled({ expiresS: '60', method: 'PUT' }, { headers: { 'x-amz-meta-view': 'added on the way' } }) },

  'missing-content-sha256': { status: 400, code: 'InvalidRequest', provoke: async () => {
    const { url, headers } = signRaw(storage.url, { path })
    delete headers['x-amz-content-sha256']
    return fetch(url, { headers })
  } },
  'invalid-content-sha256': { status: 400, code: 'InvalidArgument', provoke: () => send({ payloadHash: 'abc' }) },
  'content-sha256-mismatch': { status: 400, code: 'XAmzContentSHA256Mismatch', provoke: () => send({ method: 'PUT', body: 'film', payloadHash: 'a'.repeat(64) }) },
  'chunked-signing': { status: 501, code: 'NotImplemented', provoke: () => send({ method: 'PUT', body: 'film', payloadHash: 'STREAMING-UNSIGNED-PAYLOAD-TRAILER' }) },
  'invalid-checksum': { status: 400, code: 'InvalidRequest', provoke: () => put({ 'x-amz-checksum-crc32': 'AAAA' }) },
  'checksum-mismatch': { status: 400, code: 'BadDigest', provoke: () =>
    send({ method: 'PUT', body: 'film', expiresS: '60', query: [['x-amz-checksum-crc32', 'AAAAAA==']] }) },
  'invalid-content-md5': { status: 400, code: 'InvalidDigest', provoke: () => put({ 'Content-MD5': 'not an md5' }) },
  'content-md5-mismatch': { status: 400, code: 'BadDigest', provoke: () =>
    put({ 'Content-MD5': Buffer.from(md5Hex('another film'), 'hex').toString('base64') }) },
  'missing-content-length': { status: 411, code: 'MissingContentLength', provoke: () =>
    sendLoose({ path, method: 'PUT', payloadHash: 'UNSIGNED-PAYLOAD' }, { 'Transfer-Encoding': 'chunked' }, 'film') },
  'entity-too-large': { status: 400, code: 'EntityTooLarge', provoke: () =>
    sendLoose({ path, method: 'PUT', payloadHash: 'UNSIGNED-PAYLOAD' }, { 'Content-Length': String(5 * 1024 ** 3 + 1) }, 'film') },
  'message-too-long': { status: 400, code: 'MaxMessageLengthExceeded', provoke: async () =>
    send({ method: 'POST', query: [['uploadId', await begin()]], body: Buffer.alloc(4 * MIB + 1, 32) }) },

  'invalid-uri': { status: 400, code: 'InvalidURI', provoke: () => sendSpoiled({}, { url: url => `${url}%E4` }) },
  'key-too-long': { status: 400, code: 'KeyTooLongError', provoke: () => send({ path: `/${BUCKET}/${'ä'.repeat(512)}x` }) },
  'metadata-too-large': { status: 400, code: 'MetadataTooLarge', provoke: () => put({ 'x-amz-meta-notes': 'x'.repeat(2044) }) },
  'no-such-bucket': { status: 404, code: 'NoSuchBucket', provoke: () => send({ path: '/another/film.mp4' }) },
  'no-such-key': { status: 404, code: 'NoSuchKey', provoke: () => send() },
  'invalid-range': { status: 416, code: 'InvalidRange', provoke: async () => {
    await put({})
    return send({ headers: { Range: 'bytes=4-' } })
  } },
  'precondition-failed': { status: 412, code: 'PreconditionFailed', provoke: async () => {
    await put({})
    return put({ 'If-None-Match': '*' })
  } },
  'invalid-listing-argument': { status: 400, code: 'InvalidArgument', provoke: () => send({ path: `/${BUCKET}`, query: [['list-type', '2'], ['max-keys', '-1']] }) },
  'invalid-continuation-token': { status: 400, code: 'InvalidArgument', provoke: () =>
    send({ path: `/${BUCKET}`, query: [['list-type', '2'], ['continuation-token', 'film.mp4']] }) },

  'no-such-upload': { status: 404, code: 'NoSuchUpload', provoke: () => sendPart('unknown', '1', 'film') },
  'invalid-part-number': { status: 400, code: 'InvalidArgument', provoke: async () => sendPart(await begin(), '10001', 'film') },
  'invalid-part': { status: 400, code: 'InvalidPart', provoke: async () => {
    const uploadId = await begin()
    await sendPart(uploadId, '1', 'film')
    return complete(uploadId, [[1, md5Hex('another film')]])
  } },
  'invalid-part-order': { status: 400, code: 'InvalidPartOrder', provoke: async () => {
    const uploadId = await begin()
    await sendPart(uploadId, '1', 'film')
    await sendPart(uploadId, '2', 'film')
    return complete(uploadId, [[2, md5Hex('film')], [1, md5Hex('film')]])
  } },
  'part-too-small': { status: 400, code: 'EntityTooSmall', provoke: async () => {
    const uploadId = await begin()
    const small = patternBytes(5 * MIB - 1, 1)
    await sendPart(uploadId, '1', small)
    await sendPart(uploadId, '2', 'film')
    return complete(uploadId, [[1, md5Hex(small)], [2, md5Hex('film')]])
  } },
  'malformed-xml': { status: 400, code: 'MalformedXML', provoke: async () =>
    send({ method: 'POST', query: [['uploadId', await begin()]], body: '<CompleteMultipartUpload>' }) },

  'cors-incomplete': { status: 400, code: 'BadRequest', provoke: () => fetch(`${storage.url}${path}`, { method: 'OPTIONS' }) },
  'cors-forbidden': { status: 403, code: 'AccessForbidden', provoke: () =>
    fetch(`${storage.url}${path}`, { method: 'OPTIONS', headers: { 'Origin': 'http://elsewhere.example', 'Access-Control-Request-Method': 'PUT' } }) },

  'operation-not-implemented': { status: 501, code: 'NotImplemented', provoke: () => send({ method: 'POST', query: [['select', '']] }) },
  'parameter-not-implemented': { status: 501, code: 'NotImplemented', provoke: () => send({ query: [['versionId', '1']] }) },
  'header-not-implemented': { status: 501, code: 'NotImplemented', provoke: () => put({ 'x-amz-server-side-encryption': 'AES256' }) },

  'internal-error': { status: 500, code: 'InternalError', provoke: async () => {
    const broken = await openTestStorage()
    await rm(join(broken.dataDir, 'tmp'), { recursive: true })
    const response = await sendRaw(broken.url, { path, method: 'PUT', body: 'film' })
    const copy = new Response(await response.arrayBuffer(), response)
    await broken.close()
    return copy
  } },
  'slow-down': { status: 503, code: 'SlowDown', provoke: async () => {
    await control(storage.url, 'fail', { match: '^GET /.*film', times: 1, status: 503 })
    return send()
  } },
}

describe('[house.fakes] the table of refusals', () => {
  it('[house.fakes] has a test for each row, and no test without a row', () => {
    expect(Object.keys(ROWS).sort()).toEqual(Object.keys(REFUSALS).sort())
  })

  it.each(Object.entries(ROWS))('[house.fakes] refuses: %s', async (row, { status, code, provoke }) => {
    const response = await provoke()
    const xml = await response.text()
    expect({ status: response.status, row: response.headers.get('x-fake-refusal'), code: textOf(xml, 'Code') }).toEqual({ status, row, code })
    expect(textOf(xml, 'Message')).not.toBe('')
  })
})

describe('[house.fakes] signatures at their limits', () => {
  it.each([
    ['604800', 604_799, 404], ['604800', 604_800, 403], ['1', 0, 404], ['1', 1, 403],
  ])('[house.fakes] an address good for %s s, used after %i s, answers %i', async (expiresS, ageS, status) => {
    const nowMs = Date.UTC(2030, 0, 8, 12)
    const clocked = await openTestStorage({ now: () => nowMs })
    const response = await sendRaw(clocked.url, { path, expiresS, signedAtMs: nowMs - ageS * 1000 })
    await clocked.close()
    expect(response.status).toBe(status)
  })

  it.each(['0', '-1', '1.5', 'ten', '604801'])('[house.fakes] refuses X-Amz-Expires of %s', async (expiresS) => {
    const response = await send({ expiresS })
    expect(textOf(await response.text(), 'Code')).toBe('AuthorizationQueryParametersError')
  })

  it.each([[-15 * MINUTE_MS, 404], [15 * MINUTE_MS, 404], [-15 * MINUTE_MS - 1000, 403], [15 * MINUTE_MS + 1000, 403]])(
    '[house.fakes] a header signed %i ms away from now answers %i', async (offsetMs, status) => {
      const nowMs = Date.UTC(2030, 0, 8, 12)
      const clocked = await openTestStorage({ now: () => nowMs })
      const response = await sendRaw(clocked.url, { path, signedAtMs: nowMs + offsetMs })
      await clocked.close()
      expect(response.status).toBe(status)
    })

  it('[house.fakes] refuses a signature that does not cover the host', async () => {
    const response = await send({ signedHeaders: ['x-amz-content-sha256', 'x-amz-date'] })
    const xml = await response.text()
    expect([textOf(xml, 'Code'), textOf(xml, 'HeadersNotSigned')]).toEqual(['AccessDenied', 'host'])
  })

  it('[house.fakes] holds an address to the method, key, type and length it was signed for', async () => {
    const headers = { 'content-type': 'video/mp4', 'content-length': '4' }
    const signed = signRaw(storage.url, { path, method: 'PUT', expiresS: '60', headers })
    const statusOf = async (url: string, type: string, body: string) =>
      (await fetch(url, { method: 'PUT', headers: { 'content-type': type }, body })).status
    expect(await statusOf(signed.url, 'video/mp4', 'film')).toBe(200)
    expect(await statusOf(signed.url, 'text/html', 'film')).toBe(403)
    expect(await statusOf(signed.url, 'video/mp4', 'films')).toBe(403)
    expect(await statusOf(signed.url.replace('film.mp4', 'other.mp4'), 'video/mp4', 'film')).toBe(403)
    expect((await fetch(signed.url)).status).toBe(403)
  })

  it('[house.fakes] keeps nothing of a refused body, and what was there before', async () => {
    await put({})
    await send({ method: 'PUT', body: 'another', payloadHash: 'a'.repeat(64) })
    const response = await send()
    expect(await response.text()).toBe('film')
    const state: unknown = await (await control(storage.url, 'state')).json()
    expect(state).toMatchObject({ objects: [{ key: 'film.mp4', bytes: 4 }], refusals: { 'content-sha256-mismatch': 1 } })
  })

  it.each(['0', '10001', '-1', '1.5', 'one'])('[house.fakes] refuses part number %s', async (number) => {
    const response = await sendPart(await begin(), number, 'film')
    expect(textOf(await response.text(), 'Code')).toBe('InvalidArgument')
  })

  it('[house.fakes] knows an upload only by its own key', async () => {
    const uploadId = await begin()
    const response = await send({ path: `/${BUCKET}/other.mp4`, method: 'PUT', query: [['partNumber', '1'], ['uploadId', uploadId]], body: 'film' })
    expect(textOf(await response.text(), 'Code')).toBe('NoSuchUpload')
  })
})
