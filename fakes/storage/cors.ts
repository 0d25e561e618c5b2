import type { Answer } from './answer'
import { Refusal } from './refusals'
import type { StorageRequest } from './request'

/** Origins whose pages may use the bucket, or '*' for all. */
export type AllowedOrigins = readonly string[] | '*'

/** As the product's own bucket is to be set: pages read film and send parts; they never list or delete. */
const ALLOWED_METHODS = ['GET', 'HEAD', 'PUT']
const EXPOSED_HEADERS = 'ETag, Accept-Ranges, Content-Length, Content-Range, x-amz-request-id, x-amz-checksum-crc32, x-amz-checksum-sha256'
const MAX_AGE_S = 3000
const VARY = 'Origin, Access-Control-Request-Headers, Access-Control-Request-Method'

/**
 * The CORS headers of an ordinary answer: none when the request comes from no page, from an origin not allowed, or
 * with a method not allowed. The service then still answers, and the browser keeps the answer from the page.
 */
export function corsHeaders(request: StorageRequest, allowed: AllowedOrigins): Record<string, string> {
  const origin = request.headers.get('origin')
  if (origin === undefined || !ALLOWED_METHODS.includes(request.method) || !isAllowed(origin, allowed)) return {}
  return { ...originHeaders(origin, allowed), 'Access-Control-Expose-Headers': EXPOSED_HEADERS, 'Vary': VARY }
}

/** Answers a preflight, or refuses it as the service does, with a code that shows in the browser's network panel. */
export function answerPreflight(request: StorageRequest, allowed: AllowedOrigins): Answer {
  const origin = request.headers.get('origin')
  const method = request.headers.get('access-control-request-method')
  if (origin === undefined || method === undefined) throw new Refusal('cors-incomplete')
  if (!isAllowed(origin, allowed) || !ALLOWED_METHODS.includes(method)) throw new Refusal('cors-forbidden', `${method} from ${origin}`)
  const wanted = request.headers.get('access-control-request-headers')
  return {
    status: 200,
    headers: {
      ...originHeaders(origin, allowed),
      'Access-Control-Allow-Methods': ALLOWED_METHODS.join(', '),
      ...(wanted === undefined ? {} : { 'Access-Control-Allow-Headers': wanted }),
      'Access-Control-Expose-Headers': EXPOSED_HEADERS,
      'Access-Control-Max-Age': String(MAX_AGE_S),
      'Vary': VARY,
    },
  }
}

function isAllowed(origin: string, allowed: AllowedOrigins): boolean {
  return allowed === '*' || allowed.includes(origin)
}

function originHeaders(origin: string, allowed: AllowedOrigins): Record<string, string> {
  return allowed === '*'
    ? { 'Access-Control-Allow-Origin': '*' }
    : { 'Access-Control-Allow-Origin': origin, 'Access-Control-Allow-Credentials': 'true' }
}
