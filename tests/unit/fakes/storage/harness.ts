import { createHash } from 'node:crypto'
import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import process from 'node:process'
import type { S3ClientConfig } from '@aws-sdk/client-s3'
import { S3Client } from '@aws-sdk/client-s3'
import type { QueryPair } from '#fakes/storage/sigv4'
import { ALGORITHM, canonicalRequest, sha256Hex, signatureOf, signingKey, stringToSign, toAmzDate, uriEncode } from '#fakes/storage/sigv4'
import type { StorageOptions } from '#fakes/storage/server'
import { startStorage } from '#fakes/storage/server'

process.env.AWS_SDK_JS_NODE_VERSION_SUPPORT_WARNING_DISABLED = 'true'

export const BUCKET = 'turfnote-film'
export const REGION = 'eu-central-1'
export const ACCESS_KEY = 'TESTACCESSKEY0000001'
export const SECRET_KEY = 'a-secret-for-tests-only'
export const MIB = 1024 ** 2

export interface TestStorage {
  url: string
  dataDir: string
  client: S3Client
  close(): Promise<void>
}

/** A stand-in of its own on a free port with a folder of its own, and the real SDK pointed at it. */
export async function openTestStorage(options: Partial<StorageOptions> = {}): Promise<TestStorage> {
  const dataDir = options.dataDir ?? await mkdtemp(join(tmpdir(), 'turfnote-storage-'))
  const storage = await startStorage({
    port: 0, bucket: BUCKET, region: REGION, accessKey: ACCESS_KEY, secretKey: SECRET_KEY, ...options, dataDir,
  })
  const client = createClient(storage.url)
  return {
    url: storage.url,
    dataDir,
    client,
    close: async () => {
      client.destroy()
      await storage.close()
      if (options.dataDir === undefined) await rm(dataDir, { recursive: true, force: true })
    },
  }
}

export function createClient(endpoint: string, overrides: S3ClientConfig = {}): S3Client {
  return new S3Client({
    endpoint,
    region: REGION,
    credentials: { accessKeyId: ACCESS_KEY, secretAccessKey: SECRET_KEY },
    forcePathStyle: true,
    requestChecksumCalculation: 'WHEN_REQUIRED',
    responseChecksumValidation: 'WHEN_REQUIRED',
    maxAttempts: 1,
    ...overrides,
  })
}

export interface RawRequest {
  method?: string
  /** Decoded; encoded on the way out. */
  path: string
  query?: QueryPair[]
  headers?: Record<string, string>
  body?: string | Buffer
  /** What the request says of its body; its true hash by default. Left out of the headers when undefined. */
  payloadHash?: string
  signedAtMs?: number
  accessKey?: string
  secretKey?: string
  scope?: string
  /** Signs only these instead of host and every given header. */
  signedHeaders?: string[]
  /** Present: signed in the address, good for so many seconds. */
  expiresS?: string
}

/** A request signed by hand, so that a test may spoil any one thing about it. */
export function signRaw(endpoint: string, raw: RawRequest): { url: string, method: string, headers: Record<string, string> } {
  const { method = 'GET', accessKey = ACCESS_KEY, secretKey = SECRET_KEY, signedAtMs = Date.now() } = raw
  const isQuery = raw.expiresS !== undefined
  const payloadHash = raw.payloadHash ?? (isQuery ? 'UNSIGNED-PAYLOAD' : sha256Hex(raw.body ?? ''))
  const amzDate = toAmzDate(signedAtMs)
  const scope = raw.scope ?? `${amzDate.slice(0, 8)}/${REGION}/s3/aws4_request`
  const [date = '', region = '', service = ''] = scope.split('/')
  const headers: Record<string, string> = { ...raw.headers, ...(isQuery ? {} : { 'x-amz-date': amzDate, 'x-amz-content-sha256': payloadHash }) }
  const signedHeaders = raw.signedHeaders ?? ['host', ...Object.keys(headers).map(name => name.toLowerCase())].sort()
  const query: QueryPair[] = [...raw.query ?? [], ...(isQuery
    ? [
      ['X-Amz-Algorithm', ALGORITHM], ['X-Amz-Credential', `${accessKey}/${scope}`], ['X-Amz-Date', amzDate],
      ['X-Amz-Expires', raw.expiresS ?? ''], ['X-Amz-SignedHeaders', signedHeaders.join(';')],
    ] satisfies QueryPair[]
    : [])]
  const sent = new Map([['host', new URL(endpoint).host], ...Object.entries(headers).map(([name, value]) => [name.toLowerCase(), value] as const)])
  const canonical = canonicalRequest({ method, path: raw.path, query, headers: sent, signedHeaders, payloadHash })
  const key = signingKey(secretKey, { date, region, service })
  const signature = signatureOf(key, stringToSign(amzDate, { date, region, service }, canonical))
  if (isQuery) query.push(['X-Amz-Signature', signature])
  else headers.Authorization = `${ALGORITHM} Credential=${accessKey}/${scope}, SignedHeaders=${signedHeaders.join(';')}, Signature=${signature}`
  const search = query.map(([name, value]) => `${uriEncode(name)}=${uriEncode(value)}`).join('&')
  const path = raw.path.split('/').map(uriEncode).join('/')
  return { url: `${endpoint}${path}${search === '' ? '' : `?${search}`}`, method, headers }
}

export async function sendRaw(endpoint: string, raw: RawRequest): Promise<Response> {
  const { url, method, headers } = signRaw(endpoint, raw)
  return fetch(url, { method, headers, ...(raw.body === undefined ? {} : { body: new Uint8Array(Buffer.from(raw.body)) }) })
}

export async function control(endpoint: string, door: string, order?: object): Promise<Response> {
  return fetch(`${endpoint}/__fake__/${door}`, door === 'state' ? {} : { method: 'POST', body: JSON.stringify(order ?? {}) })
}

/** Bytes that differ from place to place, so that a piece put in the wrong place shows. */
export function patternBytes(length: number, seed: number): Buffer {
  const block = createHash('sha512').update(`block ${seed}`).digest()
  const bytes = Buffer.alloc(length, block)
  for (let offset = 0; offset + 4 <= length; offset += 4096) bytes.writeUInt32BE(offset, offset)
  return bytes
}

export function md5Hex(content: Buffer | string): string {
  return createHash('md5').update(content).digest('hex')
}

/** An element's text in an answer of the stand-in. */
export function textOf(xml: string, name: string): string | undefined {
  return new RegExp(`<${name}>([^<]*)</${name}>`).exec(xml)?.[1]
}
