import type { CredentialScope, QueryPair } from './sigv4'
import { Refusal } from './refusals'
import {
  ALGORITHM, canonicalRequest, findAmzDateMs, isSameSignature, signatureOf, signingKey, stringToSign, toAmzDate, UNSIGNED_PAYLOAD,
} from './sigv4'

export interface Credentials {
  accessKey: string
  secretKey: string
  region: string
}

/** A request as far as its signature is concerned: decoded path and query, header names in lower case. */
export interface SignedMessage {
  method: string
  path: string
  query: readonly QueryPair[]
  headers: ReadonlyMap<string, string>
}

/** The claims of a signature before they are believed. */
interface Claim {
  place: 'header' | 'query'
  accessKey: string
  scope: CredentialScope
  amzDate: string
  signedHeaders: string[]
  signature: string
  payloadHash: string
}

const MAX_SKEW_MS = 15 * 60 * 1000
const MAX_EXPIRES_S = 7 * 24 * 60 * 60
const QUERY_NAMES = ['X-Amz-Algorithm', 'X-Amz-Credential', 'X-Amz-Date', 'X-Amz-Expires', 'X-Amz-SignedHeaders', 'X-Amz-Signature'] as const

/**
 * Believes or refuses the signature of a request and answers what it says of the body: a hex SHA-256 that the body
 * must have, or UNSIGNED-PAYLOAD. Throws a Refusal by the row that fits; time is `nowMs` in UTC epoch ms.
 */
export function authenticate(message: SignedMessage, credentials: Credentials, nowMs: number): { payloadHash: string } {
  const query = new Map(message.query)
  const authorization = message.headers.get('authorization')
  const hasQueryClaim = QUERY_NAMES.some(name => query.has(name))
  if (authorization !== undefined && hasQueryClaim) throw new Refusal('two-authentications')
  if (authorization === undefined && !hasQueryClaim) throw new Refusal('missing-authentication')

  const claim = authorization === undefined
    ? readQueryClaim(message, query, credentials.region)
    : readHeaderClaim(message, authorization, credentials.region)
  if (claim.accessKey !== credentials.accessKey) {
    throw new Refusal('unknown-access-key', '', { AWSAccessKeyId: claim.accessKey })
  }
  if (message.headers.has('x-amz-security-token') || query.has('X-Amz-Security-Token')) throw new Refusal('session-token')
  checkTime(claim, Number(query.get('X-Amz-Expires')), nowMs)
  checkSignedHeaders(message, claim)
  checkSignature(message, claim, credentials.secretKey)
  return { payloadHash: claim.payloadHash }
}

function readHeaderClaim(message: SignedMessage, authorization: string, region: string): Claim {
  if (!authorization.startsWith(`${ALGORITHM} `)) throw new Refusal('unsupported-mechanism')
  const fields = new Map(authorization.slice(ALGORITHM.length + 1).split(',').map((field) => {
    const [name = '', ...value] = field.trim().split('=')
    return [name, value.join('=')] as const
  }))
  const credential = fields.get('Credential')
  const signedHeaders = fields.get('SignedHeaders')
  const signature = fields.get('Signature')
  if (!credential || !signedHeaders || !signature) {
    throw new Refusal('malformed-authorization', 'Credential, SignedHeaders and Signature are needed')
  }
  const amzDate = findHeaderDate(message.headers)
  if (amzDate === undefined) throw new Refusal('missing-date')
  return {
    place: 'header',
    ...readCredential(credential, amzDate, region, 'wrong-header-scope'),
    amzDate,
    signedHeaders: signedHeaders.split(';'),
    signature,
    payloadHash: readPayloadHash(message.headers.get('x-amz-content-sha256')),
  }
}

/** x-amz-date rules; a plain Date header is the fallback of the standard. */
function findHeaderDate(headers: ReadonlyMap<string, string>): string | undefined {
  const amzDate = headers.get('x-amz-date')
  if (amzDate !== undefined) return findAmzDateMs(amzDate) === undefined ? undefined : amzDate
  const dateMs = Date.parse(headers.get('date') ?? '')
  return Number.isNaN(dateMs) ? undefined : toAmzDate(dateMs)
}

function readQueryClaim(message: SignedMessage, query: ReadonlyMap<string, string>, region: string): Claim {
  const missing = QUERY_NAMES.filter(name => !query.get(name))
  if (missing.length > 0) throw new Refusal('malformed-query-authorization', `missing: ${missing.join(', ')}`)
  if (query.get('X-Amz-Algorithm') !== ALGORITHM) {
    throw new Refusal('malformed-query-authorization', `X-Amz-Algorithm only supports ${ALGORITHM}`)
  }
  const expires = query.get('X-Amz-Expires') ?? ''
  if (!/^\d{1,6}$/.test(expires) || Number(expires) < 1 || Number(expires) > MAX_EXPIRES_S) throw new Refusal('expires-out-of-range')
  const amzDate = query.get('X-Amz-Date') ?? ''
  if (findAmzDateMs(amzDate) === undefined) {
    throw new Refusal('malformed-query-authorization', 'X-Amz-Date must be in the ISO8601 Long Format "yyyyMMdd\'T\'HHmmss\'Z\'"')
  }
  return {
    place: 'query',
    ...readCredential(query.get('X-Amz-Credential') ?? '', amzDate, region, 'wrong-query-scope'),
    amzDate,
    signedHeaders: (query.get('X-Amz-SignedHeaders') ?? '').split(';'),
    signature: query.get('X-Amz-Signature') ?? '',
    payloadHash: readPayloadHash(query.get('X-Amz-Content-Sha256') ?? message.headers.get('x-amz-content-sha256') ?? UNSIGNED_PAYLOAD),
  }
}

function readCredential(
  credential: string, amzDate: string, expectedRegion: string, row: 'wrong-header-scope' | 'wrong-query-scope',
): { accessKey: string, scope: CredentialScope } {
  const pieces = credential.split('/')
  const [date = '', region = '', service = '', terminator = ''] = pieces.slice(-4)
  if (pieces.length < 5 || terminator !== 'aws4_request') {
    throw new Refusal(row, 'expecting "<access key>/YYYYMMDD/REGION/s3/aws4_request"')
  }
  if (date !== amzDate.slice(0, 8)) throw new Refusal(row, `the date '${date}' is not that of the request, '${amzDate}'`)
  if (region !== expectedRegion) {
    throw new Refusal(row, `the region '${region}' is wrong; expecting '${expectedRegion}'`, { Region: expectedRegion })
  }
  if (service !== 's3') throw new Refusal(row, `the service '${service}' is wrong; expecting 's3'`)
  return { accessKey: pieces.slice(0, -4).join('/'), scope: { date, region, service } }
}

function readPayloadHash(value: string | undefined): string {
  if (value === undefined) throw new Refusal('missing-content-sha256')
  if (value.startsWith('STREAMING-')) throw new Refusal('chunked-signing', value)
  if (value !== UNSIGNED_PAYLOAD && !/^[0-9a-f]{64}$/.test(value)) throw new Refusal('invalid-content-sha256')
  return value
}

function checkTime(claim: Claim, expiresS: number, nowMs: number): void {
  const signedAtMs = findAmzDateMs(claim.amzDate) ?? Number.NaN
  const fields = { ServerTime: new Date(nowMs).toISOString() }
  if (claim.place === 'header') {
    if (!(Math.abs(nowMs - signedAtMs) <= MAX_SKEW_MS)) {
      throw new Refusal('clock-skew', '', { ...fields, RequestTime: claim.amzDate, MaxAllowedSkewMilliseconds: String(MAX_SKEW_MS) })
    }
    return
  }
  if (!(signedAtMs - nowMs <= MAX_SKEW_MS)) throw new Refusal('not-yet-valid', '', fields)
  const expiresAtMs = signedAtMs + expiresS * 1000
  if (nowMs >= expiresAtMs) throw new Refusal('request-expired', '', { ...fields, Expires: new Date(expiresAtMs).toISOString() })
}

/** Host and every x-amz-* header must be covered: what is not signed could be changed on the way. */
function checkSignedHeaders(message: SignedMessage, claim: Claim): void {
  const notSigned = [...message.headers.keys()]
    .filter(name => name === 'host' || name.startsWith('x-amz-'))
    .filter(name => !claim.signedHeaders.includes(name))
  if (notSigned.length > 0) {
    throw new Refusal('headers-not-signed', notSigned.join(', '), { HeadersNotSigned: notSigned.join(', ') })
  }
}

function checkSignature(message: SignedMessage, claim: Claim, secretKey: string): void {
  const canonical = canonicalRequest({ ...message, signedHeaders: claim.signedHeaders, payloadHash: claim.payloadHash })
  const text = stringToSign(claim.amzDate, claim.scope, canonical)
  const expected = signatureOf(signingKey(secretKey, claim.scope), text)
  if (!isSameSignature(expected, claim.signature)) {
    // The service shows both texts too: without them a wrong signature can only be guessed at. Neither holds the key.
    throw new Refusal('wrong-signature', '', { StringToSign: text, CanonicalRequest: canonical, SignatureProvided: claim.signature })
  }
}
