import { z } from 'zod'
import { declineSession, expireSession, paySession } from './checkout'
import type { Deliveries } from './delivery'
import { closeDispute, openDispute } from './giving-back'
import type { StoredEvent } from './objects'
import { EVENT_TYPES } from './objects'
import { successAddress } from './pages'
import { refuse } from './refusals'
import { getRow } from './routes'
import { failureSchema } from './store'
import type { World } from './world'
import { NO_CAUSE } from './world'

export interface ControlCall {
  world: World
  deliveries: Deliveries
  id: string
  body: string
}

interface ControlRoute {
  method: 'GET' | 'POST'
  path: RegExp
  run: (call: ControlCall) => unknown
}

const deliverSchema = z.strictObject({
  eventId: z.string().optional(),
  eventIds: z.array(z.string()).min(1).optional(),
  type: z.enum(EVENT_TYPES).optional(),
  times: z.number().int().min(1).max(100).default(1),
  order: z.enum(['as-is', 'reversed', 'shuffled']).default('as-is'),
  seed: z.number().int().default(1),
  delayMs: z.number().int().min(0).max(60_000).default(0),
  atOnce: z.boolean().default(false),
})

const orderedFailure = failureSchema.refine(
  ({ status, hang, reset, after }) => {
    const ways = [status !== undefined, hang === true, reset === true].filter(Boolean).length
    return ways === 1 || (ways === 0 && after === 'commit')
  },
  'name exactly one of status, hang and reset (after: "commit" alone means reset)',
)

const session = ({ world, id }: ControlCall) => getRow(world.store.state.sessions, id, 'checkout.session', 'session')

export const CONTROL_ROUTES: readonly ControlRoute[] = [
  { method: 'GET', path: /^\/__fake__\/state$/, run: ({ world }) => world.store.state },
  { method: 'POST', path: /^\/__fake__\/reset$/, run: reset },
  {
    method: 'POST',
    path: /^\/__fake__\/sessions\/([^/]+)\/pay$/,
    run: (call) => {
      const paid = paySession(call.world, session(call))
      return { session: paid, redirectTo: successAddress(paid) }
    },
  },
  { method: 'POST', path: /^\/__fake__\/sessions\/([^/]+)\/decline$/, run: call => ({ session: declineSession(call.world, session(call)) }) },
  // Walking away tells the service nothing: the session stays open until it expires.
  { method: 'POST', path: /^\/__fake__\/sessions\/([^/]+)\/abandon$/, run: call => ({ session: session(call), redirectTo: session(call).cancel_url }) },
  { method: 'POST', path: /^\/__fake__\/sessions\/([^/]+)\/expire$/, run: call => ({ session: expireSession(call.world, session(call), NO_CAUSE) }) },
  {
    method: 'POST',
    path: /^\/__fake__\/payment_intents\/([^/]+)\/dispute$/,
    run: ({ world, id }) => ({ dispute: openDispute(world, getRow(world.store.state.paymentIntents, id, 'payment_intent', 'intent')) }),
  },
  {
    method: 'POST',
    path: /^\/__fake__\/disputes\/([^/]+)\/close$/,
    run: ({ world, id, body }) => {
      const { status } = readBody(z.strictObject({ status: z.enum(['won', 'lost']) }), body)
      return { dispute: closeDispute(world, getRow(world.store.state.disputes, id, 'dispute', 'dispute'), status) }
    },
  },
  { method: 'POST', path: /^\/__fake__\/deliver$/, run: deliver },
  {
    method: 'POST',
    path: /^\/__fake__\/hold$/,
    run: ({ world, body }) => {
      world.store.state.isHolding = readBody(z.strictObject({ on: z.boolean() }), body).on
      return { isHolding: world.store.state.isHolding }
    },
  },
  {
    method: 'POST',
    path: /^\/__fake__\/webhook$/,
    run: ({ world, body }) => {
      world.store.state.webhookUrl = localAddress(readBody(z.strictObject({ url: z.string() }), body).url)
      return { webhookUrl: world.store.state.webhookUrl }
    },
  },
  {
    method: 'POST',
    path: /^\/__fake__\/clock$/,
    run: ({ world, body }) => {
      world.store.state.clockOffsetMs = readBody(z.strictObject({ offsetMs: z.number().int() }), body).offsetMs
      return { nowMs: world.nowMs() }
    },
  },
  {
    method: 'POST',
    path: /^\/__fake__\/fail$/,
    run: ({ world, body }) => {
      world.store.state.failures.push(readBody(orderedFailure, body))
      return { failures: world.store.state.failures }
    },
  },
]

/** Does one control request and returns what to answer as JSON. Throws `Refused`. */
export async function control(call: Omit<ControlCall, 'id'>, method: string, path: string): Promise<unknown> {
  for (const route of CONTROL_ROUTES) {
    const match = route.method === method ? route.path.exec(path) : null
    if (match !== null) return route.run({ ...call, id: decodeURIComponent(match[1] ?? '') })
  }
  return refuse('request-unknown', `No control request ${method} ${path}. Add it to fakes/payments/control.ts.`)
}

function reset({ world, deliveries }: ControlCall): object {
  deliveries.stop()
  world.store.reset()
  return { isReset: true }
}

async function deliver({ world, deliveries, body }: ControlCall): Promise<object> {
  const { eventId, eventIds, type, ...how } = readBody(deliverSchema, body)
  if (world.store.state.webhookUrl === null) refuse('webhook-address-missing', 'No webhook address is set: POST /__fake__/webhook { url }.')
  const { events } = world.store.state
  const ids = eventIds ?? (eventId === undefined ? undefined : [eventId])
  const chosen = ids === undefined
    ? events.filter(event => type === undefined || event.type === type)
    : ids.map(id => getEvent(events, id))
  return { deliveries: await deliveries.deliverByHand(chosen, how) }
}

function getEvent(events: readonly StoredEvent[], id: string): StoredEvent {
  return events.find(event => event.id === id) ?? refuse('resource-missing', `No such event: '${id}'`, 'eventId')
}

/** The address as given, or `webhook-not-local`: a stand-in talks to this machine only. */
export function localAddress(url: string): string {
  if (!URL.canParse(url)) return refuse('webhook-not-local', `Not an address: ${url}`, 'url')
  const { protocol, hostname } = new URL(url)
  const isLocal = protocol === 'http:' && ['127.0.0.1', 'localhost', '[::1]'].includes(hostname)
  return isLocal ? url : refuse('webhook-not-local', `The webhook address must be http on this machine, not ${url}.`, 'url')
}

function readBody<Schema extends z.ZodType>(schema: Schema, body: string): z.output<Schema> {
  const result = schema.safeParse(parseJson(body === '' ? '{}' : body))
  return result.success ? result.data : refuse('control-unreadable', z.prettifyError(result.error))
}

function parseJson(body: string): unknown {
  try {
    return JSON.parse(body)
  }
  catch {
    return refuse('control-unreadable', 'The body of a control request must be JSON.')
  }
}
