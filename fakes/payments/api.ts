import type { IncomingMessage, ServerResponse } from 'node:http'
import { fail } from './failures'
import type { FormTree } from './form'
import { fingerprint, parseForm } from './form'
import type { IdempotencyKeys, KeyedRequest } from './idempotency'
import { Refused, refuse } from './refusals'
import type { Route } from './routes'
import { ROUTES } from './routes'
import type { Failure } from './store'
import { newId } from './store'
import type { World } from './world'
import { API_VERSION } from './world'

export interface ApiRequest {
  method: string
  url: URL
  headers: IncomingMessage['headers']
  body: string
}

export interface ApiServer {
  world: World
  keys: IdempotencyKeys
  secretKey: string
}

interface Reply { status: number, body: string, requestId: string, isReplay: boolean, refusal?: string }

/** Answers one request to `/v1/`: key, version, route, idempotency, ordered failure, then the work itself. */
export async function answerApi(api: ApiServer, request: ApiRequest, response: ServerResponse, failure: Failure | undefined): Promise<void> {
  const requestId = newId('req')
  const keyed = keyedRequest(request)
  const log = (outcome: number | string, isReplay: boolean) => api.world.store.logRequest({
    id: requestId, atMs: api.world.nowMs(), method: request.method, path: request.url.pathname,
    idempotencyKey: keyed?.key ?? null, outcome, isReplay,
  })
  let isHeld = false
  try {
    const { route, id } = admit(api, request)
    const tree = readTree(request)
    const kept = keyed === undefined ? undefined : api.keys.begin(api.world.store.state, { ...keyed, fingerprint: fingerprint(tree) }, api.world.nowMs())
    isHeld = keyed !== undefined && kept === undefined
    if (failure !== undefined && failure.after === undefined) {
      log(await fail(failure, response), false)
      return
    }
    const reply = kept === undefined
      ? act(api, route, { id, tree, requestId, keyed })
      : { ...kept, requestId, isReplay: true, original: kept.requestId }
    api.world.commit()
    if (failure !== undefined) {
      log(`${await fail(failure, response)} after commit`, reply.isReplay)
      return
    }
    log(reply.status, reply.isReplay)
    send(response, request, reply)
  }
  catch (error) {
    if (!(error instanceof Refused)) throw error
    log(error.row.status, false)
    send(response, request, { ...replyTo(error, requestId), isReplay: false })
  }
  finally {
    if (isHeld && keyed !== undefined) api.keys.release(keyed.key)
  }
}

function keyedRequest(request: ApiRequest): Omit<KeyedRequest, 'fingerprint'> | undefined {
  const key = request.headers['idempotency-key']
  if (request.method !== 'POST' || typeof key !== 'string') return undefined
  return { key, method: request.method, path: request.url.pathname }
}

function admit(api: ApiServer, request: ApiRequest): { route: Route, id: string } {
  const { authorization } = request.headers
  if (authorization === undefined || !authorization.startsWith('Bearer ')) {
    refuse('key-missing', 'You did not provide an API key. Send it as a bearer token in the Authorization header.')
  }
  if (authorization.slice('Bearer '.length) !== api.secretKey) refuse('key-wrong', 'Invalid API Key provided.')
  const version = request.headers['stripe-version']
  if (version !== undefined && !/^\d{4}-\d{2}-\d{2}(?:\.[a-z]+)?$/.test(String(version))) {
    refuse('version-unreadable', `Invalid Stripe API version: ${String(version)}`)
  }
  for (const route of ROUTES) {
    const match = route.method === request.method ? route.path.exec(request.url.pathname) : null
    if (match !== null) return { route, id: decodeURIComponent(match[1] ?? '') }
  }
  return refuse('request-unknown', `Unrecognized request URL (${request.method}: ${request.url.pathname}). If the real service answers it, add a route to fakes/payments/routes.ts.`)
}

function readTree(request: ApiRequest): FormTree {
  if (request.method === 'GET') return parseForm(request.url.search.slice(1))
  const type = request.headers['content-type'] ?? ''
  if (request.body !== '' && !type.startsWith('application/x-www-form-urlencoded')) {
    refuse('form-expected', `The body must be application/x-www-form-urlencoded, not ${type || 'without a type'}.`)
  }
  return parseForm(request.body)
}

interface Work { id: string, tree: FormTree, requestId: string, keyed: Omit<KeyedRequest, 'fingerprint'> | undefined }

function act(api: ApiServer, route: Route, work: Work): Reply {
  const { world, keys } = api
  const { requestId, keyed } = work
  const cause = { requestId, idempotencyKey: keyed?.key ?? null }
  const reply = attempt(route.prepare({ world, id: work.id, tree: work.tree, cause }), requestId)
  if (keyed !== undefined) {
    keys.keep(world.store.state, { ...keyed, fingerprint: fingerprint(work.tree) }, { status: reply.status, body: reply.body, requestId }, world.nowMs())
  }
  return reply
}

function attempt(work: () => object, requestId: string): Reply {
  try {
    return { status: 200, body: JSON.stringify(work(), null, 2), requestId, isReplay: false }
  }
  catch (error) {
    if (!(error instanceof Refused)) throw error
    return { ...replyTo(error, requestId), isReplay: false }
  }
}

function replyTo(refused: Refused, requestId: string) {
  return { status: refused.row.status, body: JSON.stringify(refused.toBody(), null, 2), requestId, refusal: refused.refusal }
}

function send(response: ServerResponse, request: ApiRequest, reply: Reply & { original?: string }): void {
  const key = request.headers['idempotency-key']
  response.writeHead(reply.status, {
    'Content-Type': 'application/json',
    'Request-Id': reply.requestId,
    'Stripe-Version': String(request.headers['stripe-version'] ?? API_VERSION),
    ...(typeof key === 'string' ? { 'Idempotency-Key': key } : {}),
    ...(reply.isReplay ? { 'Idempotent-Replayed': 'true', 'Original-Request': reply.original } : {}),
    ...(reply.refusal === undefined ? {} : { 'Stand-In-Refusal': reply.refusal }),
  })
  response.end(reply.body)
}
