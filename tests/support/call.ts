import { randomUUID } from 'node:crypto'
import type { DemoKey } from '#fakes/demo/people'
import type { World } from './world'

export interface Answer {
  status: number
  headers: Headers
  /** Parsed JSON, or undefined when the answer is none. */
  body: unknown
  text: string
}

export interface CallOptions {
  as?: DemoKey
  cookie?: string
  body?: unknown
  /** Sent as it is, in place of `body`. */
  rawBody?: string
  key?: string
  headers?: Record<string, string>
}

/** A request as the product's own pages make it: same origin, JSON, a key on every POST. */
export async function call(world: World, method: string, path: string, options: CallOptions = {}): Promise<Answer> {
  const cookie = options.cookie ?? (options.as ? world.cookie(options.as) : undefined)
  const body = options.rawBody ?? (options.body === undefined ? undefined : JSON.stringify(options.body))
  const response = await fetch(`${world.url}${path}`, {
    method,
    redirect: 'manual',
    headers: {
      'sec-fetch-site': 'same-origin',
      ...(cookie ? { cookie } : {}),
      ...(body === undefined ? {} : { 'content-type': 'application/json' }),
      ...(method === 'POST' ? { 'idempotency-key': options.key ?? randomUUID() } : {}),
      ...options.headers,
    },
    body,
  })
  const text = await response.text()
  return { status: response.status, headers: response.headers, body: parse(text), text }
}

function parse(text: string): unknown {
  try {
    return JSON.parse(text)
  }
  catch {
    return undefined
  }
}
