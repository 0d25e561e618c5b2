import { refuse } from './refusals'
import type { State } from './store'

type Row = Readonly<Record<string, unknown>>

// Which stored table a property that holds an id points into.
const POINTS_TO = {
  payment_intent: 'paymentIntents',
  latest_charge: 'charges',
  charge: 'charges',
} as const satisfies Record<string, keyof State>

const EXPANDABLE: Readonly<Record<string, readonly string[]>> = {
  'checkout.session': ['line_items', 'payment_intent', 'payment_intent.latest_charge'],
  'payment_intent': ['latest_charge'],
  'charge': ['payment_intent'],
  'refund': ['charge', 'payment_intent', 'payment_intent.latest_charge'],
  'dispute': ['charge', 'payment_intent', 'payment_intent.latest_charge'],
  'event': [],
}

/** The object with the named properties filled in. Throws `expand-unknown` for a property that is not spoken here. */
export function expanded(state: State, object: Row, paths: readonly string[] = []): Row {
  const kind = String(object['object'])
  for (const path of paths) {
    if (!EXPANDABLE[kind]?.includes(path)) {
      refuse('expand-unknown', `This property cannot be expanded (${path}). If the real service expands it, add it to fakes/payments/answers.ts.`, 'expand')
    }
  }
  return paths.reduce((filled, path) => fill(state, filled, path.split('.')), object)
}

function fill(state: State, object: Row, [property = '', ...rest]: string[]): Row {
  if (property === 'line_items') {
    const items = state.lineItems[String(object['id'])] ?? []
    return { ...object, line_items: { object: 'list', data: items, has_more: false, url: `/v1/checkout/sessions/${String(object['id'])}/line_items` } }
  }
  const value = object[property]
  const target = isPointer(property) ? rowOf(state, property, value) : undefined
  if (target === undefined) return object
  return { ...object, [property]: rest.length === 0 ? target : fill(state, target, rest) }
}

function isPointer(property: string): property is keyof typeof POINTS_TO {
  return property in POINTS_TO
}

// A property filled in by an earlier path is an object already.
function rowOf(state: State, property: keyof typeof POINTS_TO, value: unknown): Row | undefined {
  if (typeof value === 'string') return state[POINTS_TO[property]][value]
  return isRow(value) ? value : undefined
}

function isRow(value: unknown): value is Row {
  return typeof value === 'object' && value !== null
}

/** One page of a list in the service's shape, newest first; `starting_after` is the last id of the page before. */
export function pageOf<Item extends Row & { id: string }>(
  state: State, url: string, oldestFirst: readonly Item[],
  page: { limit?: number | undefined, starting_after?: string | undefined, expand?: string[] | undefined },
): Row {
  const all = [...oldestFirst].reverse()
  const after = page.starting_after
  const start = after === undefined ? 0 : all.findIndex(item => item.id === after) + 1
  if (after !== undefined && start === 0) refuse('reference-missing', `No such object: '${after}'`, 'starting_after')
  const end = start + (page.limit ?? 10)
  const paths = (page.expand ?? []).map(path => path.replace(/^data\./, ''))
  return {
    object: 'list',
    data: all.slice(start, end).map(item => expanded(state, item, paths)),
    has_more: end < all.length,
    url,
  }
}
