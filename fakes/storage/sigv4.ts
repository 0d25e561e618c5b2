import { createHash, createHmac, timingSafeEqual } from 'node:crypto'

/**
 * Signature Version 4 as Amazon S3 reads it: pure functions, used for signatures in the header and in the address alike.
 * Source: Amazon S3 API Reference, "Authenticating Requests (AWS Signature Version 4)".
 */

export const ALGORITHM = 'AWS4-HMAC-SHA256'
export const UNSIGNED_PAYLOAD = 'UNSIGNED-PAYLOAD'

export type QueryPair = readonly [name: string, value: string]

/** What a signature covers. `path` and `query` are decoded; header names are lower case. */
export interface SignedParts {
  method: string
  path: string
  query: readonly QueryPair[]
  headers: ReadonlyMap<string, string>
  signedHeaders: readonly string[]
  /** Hex SHA-256 of the body, or the word UNSIGNED-PAYLOAD. */
  payloadHash: string
}

export interface CredentialScope {
  /** Eight digits, e.g. 20130524. */
  date: string
  region: string
  service: string
}

/** Hex SHA-256 of text or bytes. */
export function sha256Hex(content: string | Uint8Array): string {
  return createHash('sha256').update(content).digest('hex')
}

/** Percent-encodes everything but RFC 3986 unreserved characters, hex in capitals, over the UTF-8 bytes. */
export function uriEncode(text: string): string {
  return encodeURIComponent(text).replace(/[!'()*]/g, char => `%${char.charCodeAt(0).toString(16).toUpperCase()}`)
}

/** The path encoded once, slashes kept; S3 alone among AWS services does not encode twice nor squeeze `//` and `..`. */
export function canonicalPath(path: string): string {
  return path.split('/').map(uriEncode).join('/')
}

/** Pairs encoded, then sorted by encoded name and value; the signature itself is never part of what it signs. */
export function canonicalQuery(query: readonly QueryPair[]): string {
  return query
    .filter(([name]) => name !== 'X-Amz-Signature')
    .map(([name, value]) => [uriEncode(name), uriEncode(value)] as const)
    .sort(([nameA, valueA], [nameB, valueB]) => compareBytes(nameA, nameB) || compareBytes(valueA, valueB))
    .map(([name, value]) => `${name}=${value}`)
    .join('&')
}

/** Encoded text is ASCII, so comparing code units is comparing bytes; localeCompare would not be. */
function compareBytes(a: string, b: string): number {
  return a < b ? -1 : a > b ? 1 : 0
}

/** The canonical request. A signed header that was not sent counts as empty, so that its signature cannot match. */
export function canonicalRequest(parts: SignedParts): string {
  const names = [...parts.signedHeaders].sort(compareBytes)
  const headerLines = names.map(name => `${name}:${(parts.headers.get(name) ?? '').trim().replace(/ +/g, ' ')}\n`)
  return [
    parts.method,
    canonicalPath(parts.path),
    canonicalQuery(parts.query),
    headerLines.join(''),
    names.join(';'),
    parts.payloadHash,
  ].join('\n')
}

/** `amzDate` is basic ISO 8601, e.g. 20130524T000000Z. */
export function stringToSign(amzDate: string, scope: CredentialScope, canonical: string): string {
  return [ALGORITHM, amzDate, `${scope.date}/${scope.region}/${scope.service}/aws4_request`, sha256Hex(canonical)].join('\n')
}

/** The day's key: the secret is folded with date, region, service and the closing word, in that order. */
export function signingKey(secretKey: string, scope: CredentialScope): Buffer {
  return [scope.date, scope.region, scope.service, 'aws4_request'].reduce<Buffer>(
    (key, text) => hmac(key, text),
    Buffer.from(`AWS4${secretKey}`, 'utf8'),
  )
}

function hmac(key: Buffer, text: string): Buffer {
  return createHmac('sha256', key).update(text).digest()
}

/** The signature in lower-case hex. */
export function signatureOf(key: Buffer, textToSign: string): string {
  return hmac(key, textToSign).toString('hex')
}

/** Whether two signatures are the same, in time that does not depend on where they differ. */
export function isSameSignature(expected: string, given: string): boolean {
  const expectedBytes = Buffer.from(expected, 'utf8')
  const givenBytes = Buffer.from(given, 'utf8')
  return expectedBytes.length === givenBytes.length && timingSafeEqual(expectedBytes, givenBytes)
}

/** UTC epoch ms of `20130524T000000Z`; undefined for anything else, impossible days included. */
export function findAmzDateMs(amzDate: string): number | undefined {
  const match = /^(\d{4})(\d{2})(\d{2})T(\d{2})(\d{2})(\d{2})Z$/.exec(amzDate)
  if (!match) return undefined
  const [, year, month, day, hour, minute, second] = match.map(Number)
  const ms = Date.UTC(year ?? 0, (month ?? 0) - 1, day, hour, minute, second)
  // Date.UTC rolls 31 April over to 1 May; a date that does not come back the same is none.
  return toAmzDate(ms) === amzDate ? ms : undefined
}

/** Basic ISO 8601 in whole seconds, as x-amz-date carries it. */
export function toAmzDate(ms: number): string {
  return new Date(ms).toISOString().replace(/[-:]|\.\d{3}/g, '')
}
