import type { IncomingMessage, ServerResponse } from 'node:http'
import { createServer } from 'node:http'
import type { ApiRequest, ApiServer } from './api'
import { answerApi } from './api'
import { expireDueSessions } from './checkout'
import { control, localAddress } from './control'
import { Deliveries, RETRY_DELAYS_MS } from './delivery'
import { fail, takeFailure } from './failures'
import { sendHostedPage, visitHostedPage } from './hosted'
import { IdempotencyKeys } from './idempotency'
import { Refused, refuse } from './refusals'
import { Store } from './store'
import type { World } from './world'

export interface PaymentsOptions {
  /** 0 takes a free port. */
  port: number
  /** A JSON file that survives restarts; left out, everything is forgotten with the process. */
  statePath?: string | undefined
  secretKey: string
  webhookSecret: string
  webhookUrl?: string | undefined
  /** The clock of sessions and events, in UTC epoch ms. Signatures always use the machine's. */
  now?: () => number
  /** Waits between attempts to deliver an event; when they run out it is given up. */
  retryDelaysMs?: readonly number[]
}

export interface RunningPayments {
  url: string
  port: number
  close: () => Promise<void>
}

const LARGEST_BODY_BYTES = 1_000_000
const EXPIRY_SWEEP_MS = 1000

/** Starts the stand-in on 127.0.0.1. `close` ends open connections and planned deliveries; the state file is up to date by then. */
export async function startPayments(options: PaymentsOptions): Promise<RunningPayments> {
  const webhookUrl = options.webhookUrl === undefined ? undefined : localAddress(options.webhookUrl)
  const store = new Store(options.statePath, webhookUrl)
  const readClock = options.now ?? Date.now
  const nowMs = () => readClock() + store.state.clockOffsetMs
  const deliveries = new Deliveries(store, {
    webhookSecret: options.webhookSecret,
    retryDelaysMs: options.retryDelaysMs ?? RETRY_DELAYS_MS,
  })
  const commit = () => {
    store.save()
    deliveries.kick()
  }
  const world: World = { store, commit, origin: '', nowMs, nowSeconds: () => Math.floor(nowMs() / 1000) }
  const api: ApiServer = { world, keys: new IdempotencyKeys(), secretKey: options.secretKey }
  const server = createServer((request, response) => void handle({ api, deliveries }, request, response))
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject)
    server.listen(options.port, '127.0.0.1', resolve)
  })
  const address = server.address()
  if (address === null || typeof address === 'string') throw new Error('The payments stand-in has no port.')
  world.origin = `http://127.0.0.1:${address.port}`
  const sweep = setInterval(() => settle(world), EXPIRY_SWEEP_MS)
  deliveries.kick()
  return { url: world.origin, port: address.port, close }

  async function close(): Promise<void> {
    clearInterval(sweep)
    deliveries.stop()
    store.save()
    server.closeAllConnections()
    await new Promise<void>(resolve => server.close(() => resolve()))
  }
}

function settle(world: World): void {
  if (expireDueSessions(world)) world.commit()
}

interface Running { api: ApiServer, deliveries: Deliveries }

async function handle(running: Running, request: IncomingMessage, response: ServerResponse): Promise<void> {
  const { world } = running.api
  try {
    const method = request.method ?? 'GET'
    const url = new URL(request.url ?? '/', world.origin)
    const body = await readBody(request)
    settle(world)
    if (url.pathname.startsWith('/__fake__/')) {
      const answer = await control({ world, deliveries: running.deliveries, body }, method, url.pathname)
      world.commit()
      sendJson(response, 200, answer)
    }
    else await answerOutside(running, { method, url, headers: request.headers, body }, response)
  }
  catch (error) {
    answerError(error, response)
  }
}

async function answerOutside({ api }: Running, request: ApiRequest, response: ServerResponse): Promise<void> {
  const { method, url } = request
  const failure = takeFailure(api.world.store.state, method, url.pathname)
  if (url.pathname.startsWith('/v1/')) return answerApi(api, request, response, failure)
  if (failure !== undefined && failure.after === undefined) return void await fail(failure, response)
  const reply = visitHostedPage(api.world, method, url.pathname)
    ?? refuse('request-unknown', `Nothing answers ${method} ${url.pathname} here. Pages stand in fakes/payments/hosted.ts, the API in routes.ts.`)
  api.world.commit()
  if (failure !== undefined) return void await fail(failure, response)
  sendHostedPage(response, reply)
}

async function readBody(request: IncomingMessage): Promise<string> {
  const chunks: Buffer[] = []
  let bytes = 0
  for await (const chunk of request) {
    const part = Buffer.from(chunk)
    bytes += part.length
    // Read to the end all the same: leaving the loop would cut the connection before the refusal is heard.
    if (bytes <= LARGEST_BODY_BYTES) chunks.push(part)
  }
  if (bytes > LARGEST_BODY_BYTES) refuse('body-too-large', 'The body is over one megabyte.')
  return Buffer.concat(chunks).toString('utf8')
}

function answerError(error: unknown, response: ServerResponse): void {
  if (response.headersSent || response.destroyed) return
  if (error instanceof Refused) {
    response.setHeader('Stand-In-Refusal', error.refusal)
    return sendJson(response, error.row.status, error.toBody())
  }
  const message = error instanceof Error ? error.stack ?? error.message : String(error)
  process.stderr.write(`payments stand-in: ${message}\n`)
  sendJson(response, 500, { error: { type: 'api_error', message: 'The stand-in itself failed; its log says how.' } })
}

function sendJson(response: ServerResponse, status: number, body: unknown): void {
  response.writeHead(status, { 'Content-Type': 'application/json' })
  response.end(`${JSON.stringify(body, null, 2)}\n`)
}
