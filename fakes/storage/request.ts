import type { IncomingMessage } from 'node:http'
import type { QueryPair } from './sigv4'
import { Refusal } from './refusals'

/** A request with its target taken apart; everything in it is decoded, header names are lower case. */
export interface StorageRequest {
  method: string
  /** The target as sent, still encoded. */
  target: string
  path: string
  query: QueryPair[]
  headers: ReadonlyMap<string, string>
  incoming: IncomingMessage
}

/** Takes a request apart. Refuses a target that is not percent-encoded UTF-8. */
export function readRequest(incoming: IncomingMessage): StorageRequest {
  const target = incoming.url ?? '/'
  // Not the URL class: it would squeeze `..` and `//`, which are ordinary characters of a key.
  const queryStart = target.indexOf('?')
  const rawPath = queryStart < 0 ? target : target.slice(0, queryStart)
  const rawQuery = queryStart < 0 ? '' : target.slice(queryStart + 1)
  try {
    return {
      method: incoming.method ?? '',
      target,
      path: decodeURIComponent(rawPath),
      query: rawQuery.split('&').filter(pair => pair !== '').map(readPair),
      headers: readHeaders(incoming.rawHeaders),
      incoming,
    }
  }
  catch (error) {
    if (error instanceof URIError) throw new Refusal('invalid-uri')
    throw error
  }
}

function readPair(pair: string): QueryPair {
  const [name = '', ...value] = pair.split('=')
  const decode = (text: string) => decodeURIComponent(text.replace(/\+/g, ' '))
  return [decode(name), decode(value.join('='))]
}

/** From the raw list, because node folds repeated headers in ways a signature does not. */
function readHeaders(rawHeaders: readonly string[]): Map<string, string> {
  const headers = new Map<string, string>()
  for (let index = 0; index + 1 < rawHeaders.length; index += 2) {
    const name = (rawHeaders[index] ?? '').toLowerCase()
    const value = rawHeaders[index + 1] ?? ''
    const earlier = headers.get(name)
    headers.set(name, earlier === undefined ? value : `${earlier},${value}`)
  }
  return headers
}

/** Bucket and key of a path-style target; the key may hold slashes and is empty for the bucket itself. */
export function splitPath(path: string): { bucket: string, key: string } {
  const [, bucket = '', ...rest] = path.split('/')
  return { bucket, key: rest.join('/') }
}

export function findQueryValue(request: StorageRequest, name: string): string | undefined {
  return request.query.find(([candidate]) => candidate === name)?.[1]
}

/** An x-amz-* value from the header or, as presigners hoist them, from the query, where case does not matter. */
export function findAmzValue(request: StorageRequest, name: string): string | undefined {
  return request.headers.get(name) ?? request.query.find(([candidate]) => candidate.toLowerCase() === name)?.[1]
}
