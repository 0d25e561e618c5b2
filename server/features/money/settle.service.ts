import type { Done } from '#shared/types/answers'
import type { CheckoutSnapshot, PaymentIntentSnapshot } from '#server/adapters/payments'
import type { Ctx, SignedInCtx } from '#server/context'
import { inTransaction } from '#server/database/transaction'
import { getReviewRecord } from '#server/features/reviews/review.service'
import { pokeJobs } from '#server/write'
import { applyExpired, applyGivenBack, applyPaid } from './apply-payment'
import { reachingProvider } from './checkout.service'
import type { OrderRecord } from './order.repository'
import { findOrder, listOrderIds, listOrdersToLookAt, updateOrder } from './order.repository'

const MINUTE_MS = 60_000
const BATCH = 20

/** What the provider says of an order at this moment. */
export interface ProviderFacts {
  checkout: CheckoutSnapshot
  payment: PaymentIntentSnapshot | undefined
}

/**
 * Reads an order again from the provider and does what follows: whatever woke us (an event, a page that came back, the clock) was only a hint.
 * Running it twice, or eight times at once, ends the same.
 */
export async function settleOrder(ctx: Ctx, orderId: string): Promise<void> {
  const known = await findOrder(ctx.db, orderId)
  if (!known?.checkout_id) return
  const facts = await readProvider(ctx, known.checkout_id)
  await inTransaction(ctx.db, async (db) => {
    const order = await findOrder(db, orderId)
    if (!order) return
    if (order.state === 'open' && facts.checkout.isPaid && facts.payment) await applyPaid(db, ctx, order, facts.payment)
    else if (order.state === 'open' && facts.checkout.status === 'expired') await applyExpired(db, ctx, order)
    const settled = await findOrder(db, orderId)
    if (settled && facts.payment) await applyGivenBack(db, ctx, settled, facts.payment)
  })
  pokeJobs(ctx)
}

async function readProvider(ctx: Ctx, checkoutId: string): Promise<ProviderFacts> {
  return reachingProvider(async () => {
    const checkout = await ctx.payments.getCheckout(checkoutId)
    const payment = checkout.paymentIntentId === null ? undefined : await ctx.payments.getPaymentIntent(checkout.paymentIntentId)
    return { checkout, payment }
  })
}

/**
 * The student came back from the provider's page. Paid: the review waits. Not paid: the page is closed, so that it cannot be paid later by
 * mistake, and the review is a draft again.
 */
export async function returnFromPage(ctx: SignedInCtx, { id }: { id: string }): Promise<Done> {
  const review = await getReviewRecord(ctx.db, ctx, id)
  for (const orderId of await listOrderIds(ctx.db, review.id)) {
    const order = await findOrder(ctx.db, orderId)
    if (order?.state !== 'open') continue
    await settleOrder(ctx, orderId)
    const settled = await findOrder(ctx.db, orderId)
    if (settled?.state === 'open') await closePage(ctx, settled)
  }
  return { ok: true }
}

async function closePage(ctx: Ctx, order: OrderRecord): Promise<void> {
  const { checkout_id: checkoutId } = order
  if (checkoutId === null) return
  // Refused when it was paid or closed a moment ago: settling tells which.
  await reachingProvider(() => ctx.payments.expireCheckout(checkoutId)).catch(error => ctx.log.info({ orderId: order.id, err: error }, 'page not closed'))
  await settleOrder(ctx, order.id)
}

/** Looks at orders of which nothing was heard: an event can be lost, and a student may never come back from the page. */
export async function settleOpenOrders(ctx: Ctx): Promise<void> {
  for (const order of await listOrdersToLookAt(ctx.db, ctx.nowMs, BATCH)) {
    const ageMs = Math.max(ctx.nowMs - order.created_at_ms, MINUTE_MS)
    await inTransaction(ctx.db, db => updateOrder(db, order.id, { look_at_ms: ctx.nowMs + Math.min(ageMs, 60 * MINUTE_MS) }))
    if (order.checkout_id === null) await inTransaction(ctx.db, db => forgetUnopened(db, ctx, order))
    else await settleOrder(ctx, order.id).catch(error => ctx.log.warn({ orderId: order.id, err: error }, 'order not settled'))
  }
}

/** The server ended between writing the order and opening its page: after the page's time nobody can have paid on it. */
async function forgetUnopened(db: Ctx['db'], ctx: Ctx, order: { id: string, checkout_expires_at_ms: number }): Promise<void> {
  if (order.checkout_expires_at_ms > ctx.nowMs) return
  await updateOrder(db, order.id, { state: 'expired', settled_at_ms: ctx.nowMs })
}
