import { expanded, pageOf } from './answers'
import { checkSession, createSession, expireSession } from './checkout'
import type { FormTree } from './form'
import { createRefund } from './giving-back'
import {
  createRefundParameters, createSessionParameters, expandOnlyParameters, listEventsParameters,
  listRefundsParameters, listSessionsParameters, readParameters,
} from './parameters'
import { refuse } from './refusals'
import type { Cause, World } from './world'

export interface ApiCall {
  world: World
  /** The id in the path, empty where the path has none. */
  id: string
  tree: FormTree
  cause: Cause
}

type Answer = Readonly<Record<string, unknown>>

/**
 * One request of the service. `prepare` checks the parameters and returns what is then done: the service keeps
 * answers for an idempotency key only once it has begun to act, so the two halves must be told apart.
 */
export interface Route {
  method: 'GET' | 'POST'
  path: RegExp
  prepare: (call: ApiCall) => () => Answer
}

/** A row by the id of the path, or `resource-missing` naming what was looked for. */
export function getRow<Row>(rows: Readonly<Record<string, Row>>, id: string, kind: string, param = 'id'): Row {
  return (Object.hasOwn(rows, id) ? rows[id] : undefined) ?? refuse('resource-missing', `No such ${kind}: '${id}'`, param)
}

function retrieve(path: RegExp, find: (call: ApiCall) => Answer): Route {
  return {
    method: 'GET',
    path,
    prepare: (call) => {
      const { expand } = readParameters(expandOnlyParameters, call.tree)
      return () => expanded(call.world.store.state, find(call), expand)
    },
  }
}

const same = (wanted: string | undefined, actual: string | null) => wanted === undefined || wanted === actual

export const ROUTES: readonly Route[] = [
  {
    method: 'POST',
    path: /^\/v1\/checkout\/sessions$/,
    prepare: (call) => {
      const given = readParameters(createSessionParameters, call.tree)
      checkSession(call.world, given)
      return () => expanded(call.world.store.state, createSession(call.world, given), given.expand)
    },
  },
  {
    method: 'GET',
    path: /^\/v1\/checkout\/sessions$/,
    prepare: ({ world, tree }) => {
      const given = readParameters(listSessionsParameters, tree)
      return () => pageOf(world.store.state, '/v1/checkout/sessions', Object.values(world.store.state.sessions)
        .filter(row => same(given.status, row.status) && same(given.payment_intent, row.payment_intent)), given)
    },
  },
  retrieve(/^\/v1\/checkout\/sessions\/([^/]+)$/, ({ world, id }) => getRow(world.store.state.sessions, id, 'checkout.session', 'session')),
  {
    method: 'POST',
    path: /^\/v1\/checkout\/sessions\/([^/]+)\/expire$/,
    prepare: (call) => {
      const { expand } = readParameters(expandOnlyParameters, call.tree)
      const { state } = call.world.store
      return () => expanded(state, expireSession(call.world, getRow(state.sessions, call.id, 'checkout.session', 'session'), call.cause), expand)
    },
  },
  retrieve(/^\/v1\/payment_intents\/([^/]+)$/, ({ world, id }) => getRow(world.store.state.paymentIntents, id, 'payment_intent', 'intent')),
  retrieve(/^\/v1\/charges\/([^/]+)$/, ({ world, id }) => getRow(world.store.state.charges, id, 'charge')),
  {
    method: 'POST',
    path: /^\/v1\/refunds$/,
    prepare: (call) => {
      const given = readParameters(createRefundParameters, call.tree)
      return () => expanded(call.world.store.state, createRefund(call.world, given, call.cause), given.expand)
    },
  },
  {
    method: 'GET',
    path: /^\/v1\/refunds$/,
    prepare: ({ world, tree }) => {
      const given = readParameters(listRefundsParameters, tree)
      return () => pageOf(world.store.state, '/v1/refunds', Object.values(world.store.state.refunds)
        .filter(row => same(given.payment_intent, row.payment_intent) && same(given.charge, row.charge)), given)
    },
  },
  retrieve(/^\/v1\/refunds\/([^/]+)$/, ({ world, id }) => getRow(world.store.state.refunds, id, 'refund')),
  retrieve(/^\/v1\/disputes\/([^/]+)$/, ({ world, id }) => getRow(world.store.state.disputes, id, 'dispute', 'dispute')),
  {
    method: 'GET',
    path: /^\/v1\/events$/,
    prepare: ({ world, tree }) => {
      const given = readParameters(listEventsParameters, tree)
      return () => pageOf(world.store.state, '/v1/events', world.store.state.events.filter(row => same(given.type, row.type)), given)
    },
  },
  retrieve(/^\/v1\/events\/([^/]+)$/, ({ world, id }) => world.store.state.events.find(event => event.id === id)
    ?? refuse('resource-missing', `No such event: '${id}'`, 'id')),
]
