import type { IncomingHttpHeaders } from 'node:http'
import { createServer } from 'node:http'
import { z } from 'zod'
import { onTestFinished } from 'vitest'
import type { PaymentsOptions, RunningPayments } from '#fakes/payments/server'
import { startPayments } from '#fakes/payments/server'
import type { Payments } from '#server/adapters/payments'
import { createPayments } from '#server/adapters/payments'

export const SECRET_KEY = 'sk_test_stand_in'
export const WEBHOOK_SECRET = 'whsec_stand_in'

/** A stand-in on a free port, closed when the test ends. */
export async function startStandIn(options: Partial<PaymentsOptions> = {}): Promise<RunningPayments> {
  const running = await startPayments({ port: 0, secretKey: SECRET_KEY, webhookSecret: WEBHOOK_SECRET, ...options })
  onTestFinished(() => running.close())
  return running
}

export function adapterFor(running: RunningPayments): Payments {
  return createPayments({ secretKey: SECRET_KEY, webhookSecret: WEBHOOK_SECRET, apiBase: running.url })
}

/** The parameters of the smallest checkout session: one lesson at 48.00 GBP. */
export const SESSION: Readonly<Record<string, string>> = {
  'mode': 'payment',
  'line_items[0][price_data][currency]': 'gbp',
  'line_items[0][price_data][product_data][name]': 'Full swing review',
  'line_items[0][price_data][unit_amount]': '4800',
  'line_items[0][quantity]': '1',
  'success_url': 'http://127.0.0.1:3000/paid?session={CHECKOUT_SESSION_ID}',
  'cancel_url': 'http://127.0.0.1:3000/back',
}

export interface WireAnswer { status: number, headers: Headers, body: z.infer<typeof bodySchema> }

const bodySchema = z.looseObject({
  id: z.string().optional(),
  url: z.string().nullish(),
  payment_intent: z.union([z.string(), z.looseObject({ id: z.string() })]).nullish(),
  error: z.looseObject({ type: z.string(), code: z.string().optional(), message: z.string(), param: z.string().optional() }).optional(),
})

export interface WireRequest {
  method?: 'GET' | 'POST'
  form?: Readonly<Record<string, string>>
  headers?: Readonly<Record<string, string>>
  body?: string
}

/** One request on the wire, below the SDK: for what the SDK would never send, and to see headers. */
export async function ask(running: RunningPayments, path: string, request: WireRequest = {}): Promise<WireAnswer> {
  const method = request.method ?? (request.form === undefined && request.body === undefined ? 'GET' : 'POST')
  const body = request.body ?? (request.form === undefined ? undefined : new URLSearchParams(request.form).toString())
  const answer = await fetch(new URL(path, running.url), {
    method,
    headers: {
      Authorization: `Bearer ${SECRET_KEY}`,
      ...(body === undefined ? {} : { 'Content-Type': 'application/x-www-form-urlencoded' }),
      ...request.headers,
    },
    ...(body === undefined ? {} : { body }),
  })
  const json: unknown = await answer.json()
  return { status: answer.status, headers: answer.headers, body: bodySchema.parse(json) }
}

/** A control request; throws with the stand-in's words unless it is answered 200. */
export async function order<Answer extends z.ZodType>(running: RunningPayments, path: string, body: object, answer: Answer): Promise<z.infer<Answer>> {
  const reply = await fetch(`${running.url}/__fake__/${path}`, { method: 'POST', body: JSON.stringify(body) })
  const text = await reply.text()
  if (!reply.ok) throw new Error(text)
  return answer.parse(JSON.parse(text))
}

/** For `expect.poll`: on a busy machine the default second is not enough, and waiting longer hides nothing. */
export const EVENTUALLY = { timeout: 10_000 }

export const anything = z.unknown()

const stateSchema = z.looseObject({
  sessions: z.record(z.string(), z.looseObject({ status: z.string() })),
  charges: z.record(z.string(), z.looseObject({ amount_refunded: z.number() })),
  refunds: z.record(z.string(), z.looseObject({ amount: z.number() })),
  disputes: z.record(z.string(), z.looseObject({ id: z.string() })),
  events: z.array(z.looseObject({ id: z.string(), type: z.string(), pending_webhooks: z.number() })),
  deliveries: z.record(z.string(), z.looseObject({
    state: z.string(),
    attempts: z.array(z.looseObject({ answer: z.union([z.number(), z.string()]) })),
  })),
  requests: z.array(z.looseObject({ method: z.string(), path: z.string(), outcome: z.union([z.number(), z.string()]), idempotencyKey: z.string().nullable(), isReplay: z.boolean() })),
})

export async function readState(running: RunningPayments): Promise<z.infer<typeof stateSchema>> {
  const reply = await fetch(`${running.url}/__fake__/state`)
  return stateSchema.parse(await reply.json())
}

export interface OpenSession { id: string, url: string }

export async function openSession(running: RunningPayments, form: Readonly<Record<string, string>> = {}): Promise<OpenSession> {
  const { body } = await ask(running, '/v1/checkout/sessions', { form: { ...SESSION, ...form } })
  if (body.id === undefined || typeof body.url !== 'string') throw new Error(JSON.stringify(body))
  return { id: body.id, url: body.url }
}

const paidSchema = z.looseObject({ session: z.looseObject({ payment_intent: z.string() }) })

/** Opens a session and pays it; returns the ids of both. */
export async function paidSession(running: RunningPayments, form: Readonly<Record<string, string>> = {}): Promise<{ id: string, paymentIntentId: string }> {
  const { id } = await openSession(running, form)
  const { session } = await order(running, `sessions/${id}/pay`, {}, paidSchema)
  return { id, paymentIntentId: session.payment_intent }
}

export interface Received { type: string, id: string, rawBody: string, signature: string, headers: IncomingHttpHeaders }

export interface Receiver { url: string, received: Received[] }

/** A webhook address that answers as told (`answers` in turn, then 200), closed when the test ends. */
export async function startReceiver(answers: number[] = []): Promise<Receiver> {
  const received: Received[] = []
  const server = createServer(async (request, response) => {
    const chunks: Buffer[] = []
    for await (const chunk of request) chunks.push(Buffer.from(chunk))
    const rawBody = Buffer.concat(chunks).toString('utf8')
    const event = z.looseObject({ id: z.string(), type: z.string() }).parse(JSON.parse(rawBody))
    received.push({ id: event.id, type: event.type, rawBody, signature: String(request.headers['stripe-signature']), headers: request.headers })
    response.writeHead(answers.shift() ?? 200).end()
  })
  await new Promise<void>(resolve => server.listen(0, '127.0.0.1', resolve))
  onTestFinished(() => new Promise<void>((resolve) => {
    server.closeAllConnections()
    server.close(() => resolve())
  }))
  const address = server.address()
  if (address === null || typeof address === 'string') throw new Error('no port')
  return { url: `http://127.0.0.1:${address.port}/webhooks/stripe`, received }
}
