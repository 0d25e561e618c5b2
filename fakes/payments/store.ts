import { randomBytes } from 'node:crypto'
import { existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs'
import { dirname } from 'node:path'
import { z } from 'zod'
import {
  chargeSchema, disputeSchema, eventSchema, lineItemSchema, paymentIntentSchema, refundSchema, sessionSchema,
} from './objects'

export const failureSchema = z.strictObject({
  match: z.string().min(1),
  times: z.number().int().min(1).default(1),
  status: z.number().int().min(400).max(599).optional(),
  hang: z.boolean().optional(),
  reset: z.boolean().optional(),
  after: z.literal('commit').optional(),
})

const deliverySchema = z.strictObject({
  state: z.enum(['pending', 'delivered', 'given-up']),
  attempts: z.array(z.strictObject({ atMs: z.number(), answer: z.union([z.number(), z.string()]), isByHand: z.boolean() })),
  nextAtMs: z.number(),
})

const answerSchema = z.strictObject({
  method: z.string(),
  path: z.string(),
  fingerprint: z.string(),
  status: z.number(),
  body: z.string(),
  requestId: z.string(),
  atMs: z.number(),
})

const requestSchema = z.strictObject({
  id: z.string(),
  atMs: z.number(),
  method: z.string(),
  path: z.string(),
  idempotencyKey: z.string().nullable(),
  outcome: z.union([z.number(), z.string()]),
  isReplay: z.boolean(),
})

const table = <Row extends z.ZodType>(row: Row) => z.record(z.string(), row)

const stateSchema = z.strictObject({
  sessions: table(sessionSchema),
  lineItems: table(z.array(lineItemSchema)),
  /** Metadata waiting for the payment intent, which exists only once somebody tries to pay. */
  intentMetadata: table(table(z.string())),
  paymentIntents: table(paymentIntentSchema),
  charges: table(chargeSchema),
  refunds: table(refundSchema),
  disputes: table(disputeSchema),
  events: z.array(eventSchema),
  deliveries: table(deliverySchema),
  answers: table(answerSchema),
  requests: z.array(requestSchema),
  failures: z.array(failureSchema),
  isHolding: z.boolean(),
  webhookUrl: z.string().nullable(),
  clockOffsetMs: z.number(),
})

export type State = z.infer<typeof stateSchema>
export type Failure = z.infer<typeof failureSchema>
export type Delivery = z.infer<typeof deliverySchema>
export type StoredAnswer = z.infer<typeof answerSchema>
export type LoggedRequest = z.infer<typeof requestSchema>

const KEPT_REQUESTS = 500

function emptyState(webhookUrl: string | null): State {
  return {
    sessions: {}, lineItems: {}, intentMetadata: {}, paymentIntents: {}, charges: {}, refunds: {}, disputes: {},
    events: [], deliveries: {}, answers: {}, requests: [], failures: [], isHolding: false, webhookUrl, clockOffsetMs: 0,
  }
}

/** Everything the stand-in remembers: in memory, and after every change as one readable JSON file when a path is given. */
export class Store {
  state: State

  constructor(private readonly statePath: string | undefined, webhookUrl: string | undefined) {
    this.state = load(statePath) ?? emptyState(webhookUrl ?? null)
    this.state.webhookUrl = webhookUrl ?? this.state.webhookUrl
  }

  /** Written before the answer goes out: what a client was told must survive the stand-in being killed. */
  save(): void {
    if (this.statePath === undefined) return
    const draftPath = `${this.statePath}.part`
    writeFileSync(draftPath, `${JSON.stringify(this.state, null, 2)}\n`)
    renameSync(draftPath, this.statePath)
  }

  /** Forgets everything but the webhook address. */
  reset(): void {
    this.state = emptyState(this.state.webhookUrl)
    this.save()
  }

  logRequest(request: LoggedRequest): void {
    this.state.requests.push(request)
    if (this.state.requests.length > KEPT_REQUESTS) this.state.requests.shift()
  }
}

function load(statePath: string | undefined): State | undefined {
  if (statePath === undefined) return undefined
  mkdirSync(dirname(statePath), { recursive: true })
  if (!existsSync(statePath)) return undefined
  const kept: unknown = JSON.parse(readFileSync(statePath, 'utf8'))
  return stateSchema.parse(kept)
}

/** `pi_` and 24 random characters: never counted, so that ids from before a reset cannot come back. */
export function newId(prefix: string): string {
  return `${prefix}_${randomBytes(18).toString('base64url').replaceAll(/[-_]/g, 'x')}`
}
