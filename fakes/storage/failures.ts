import { z } from 'zod'
import type { RefusalName } from './refusals'

/**
 * An order to fail. `match` is a regular expression on `METHOD path?query`. Exactly one of:
 * - `status`: answer with the service's error of that status, without doing anything;
 * - `hang`: never answer (until a reset);
 * - `reset`: destroy the socket at once; with `afterBytes`, once so many bytes of the body came in; with
 *   `afterCommit`, when the work is done and only the answer is missing.
 */
export const failureSchema = z.strictObject({
  match: z.string().refine(isRegExp, 'is not a regular expression'),
  times: z.number().int().min(1).max(1_000_000),
  status: z.number().int().min(400).max(599).optional(),
  hang: z.literal(true).optional(),
  reset: z.literal(true).optional(),
  afterBytes: z.number().int().min(1).optional(),
  afterCommit: z.literal(true).optional(),
}).refine(
  order => [order.status, order.hang, order.reset].filter(way => way !== undefined).length === 1,
  'give exactly one of status, hang, reset',
).refine(
  order => (order.afterBytes === undefined && order.afterCommit === undefined) || order.reset === true,
  'afterBytes and afterCommit belong to reset',
)

export type FailureOrder = z.infer<typeof failureSchema>

function isRegExp(source: string): boolean {
  try {
    return new RegExp(source) instanceof RegExp
  }
  catch {
    return false
  }
}

/** The orders to fail, each used up as requests come that fit it. */
export class FailureOrders {
  #orders: FailureOrder[] = []

  add(order: FailureOrder): void {
    this.#orders.push(order)
  }

  /** The first order that fits, counted down; undefined when the request is to be served. */
  findAndUse(method: string, target: string): FailureOrder | undefined {
    const order = this.#orders.find(candidate => new RegExp(candidate.match).test(`${method} ${target}`))
    if (!order) return undefined
    const left = { ...order, times: order.times - 1 }
    this.#orders = this.#orders.flatMap(candidate => candidate !== order ? [candidate] : left.times > 0 ? [left] : [])
    return order
  }

  list(): readonly FailureOrder[] {
    return this.#orders
  }

  clear(): void {
    this.#orders = []
  }
}

/** The refusal that stands for a status ordered by a test; the status itself is kept as ordered. */
export function refusalForStatus(status: number): RefusalName {
  if (status === 403) return 'missing-authentication'
  if (status === 404) return 'no-such-key'
  if (status === 412) return 'precondition-failed'
  return status === 429 || status === 503 ? 'slow-down' : 'internal-error'
}
