import { PaymentsUnavailable } from '#server/adapters/payments'
import type { SignedInCtx } from '#server/context'
import { inTransaction } from '#server/database/transaction'
import type { OfferRecord } from '#server/features/offers/offer.repository'
import { findSoldOffer } from '#server/features/offers/offer.repository'
import { quotePromise } from '#server/features/offers/offer.service'
import { findUser } from '#server/features/people/user.repository'
import type { ReviewRecord } from '#server/features/reviews/review.repository'
import { updateReview } from '#server/features/reviews/review.repository'
import { newId } from '#server/ids'
import { notFound } from '#server/refusal'
import { notSoldNow, priceChanged, providerUnavailable } from './money.errors'
import type { OrderRow } from './order.repository'
import { findOpenOrder, insertOrder, updateOrder } from './order.repository'

/** The provider takes no page that closes sooner than half an hour from its own now; the minute is slack for the way there. */
const PAGE_OPEN_MS = 31 * 60_000
/** A page that is about to close is not offered again. */
const PAGE_LEFT_MS = 2 * 60_000
/** Its event should have come by then; afterwards we ask. */
const FIRST_LOOK_MS = 2 * 60_000

/**
 * The provider's page on which a review can be paid now. Asking again while a page is open gives the same page, so a second click
 * never makes a second order.
 */
export async function openCheckout(ctx: SignedInCtx, review: ReviewRecord, input: { offerId: string, priceMinor: number | undefined }): Promise<string> {
  const offer = await findSoldOffer(ctx.db, input.offerId)
  if (!offer) throw notFound('offer')
  if (input.priceMinor !== undefined && input.priceMinor !== offer.price_minor) throw priceChanged()
  const open = await findOpenOrder(ctx.db, review.id)
  if (open && isSamePage(open, offer, ctx.nowMs)) return open.checkout_url ?? await openPage(ctx, open, offer, review)
  const quote = await quotePromise(ctx, { offerId: input.offerId, coachId: review.chosen_coach_id ?? undefined })
  if (!quote.available || quote.promisedAtMs === null) throw notSoldNow()
  const order: OrderRow = {
    id: newId(ctx.nowMs),
    student_id: review.student_id,
    review_id: review.id,
    offer_version_id: offer.id,
    state: 'open',
    amount_minor: offer.price_minor,
    currency: offer.currency,
    quoted_promise_at_ms: quote.promisedAtMs,
    quoted_at_ms: ctx.nowMs,
    checkout_id: null,
    checkout_url: null,
    checkout_expires_at_ms: ctx.nowMs + PAGE_OPEN_MS,
    payment_id: null,
    look_at_ms: ctx.nowMs + FIRST_LOOK_MS,
    created_at_ms: ctx.nowMs,
    settled_at_ms: null,
    refunded_minor: 0,
    disputed_at_ms: null,
  }
  // Written before the provider is asked: whatever it then does, the order that it names is known here.
  await inTransaction(ctx.db, db => insertOrder(db, order))
  return openPage(ctx, order, offer, review)
}

function isSamePage(order: OrderRow, offer: OfferRecord, nowMs: number): boolean {
  return order.offer_version_id === offer.id && order.checkout_expires_at_ms - PAGE_LEFT_MS > nowMs
}

async function openPage(ctx: SignedInCtx, order: OrderRow, offer: OfferRecord, review: ReviewRecord): Promise<string> {
  const payer = await findUser(ctx.db, ctx.viewer.id)
  const page = `${ctx.settings.appUrl}/reviews/${review.id}`
  const checkout = await reachingProvider(() => ctx.payments.createCheckout({
    reference: order.id,
    items: [{ name: offer.name, unitAmountMinor: order.amount_minor, quantity: 1 }],
    currency: order.currency.toLowerCase(),
    successUrl: `${page}?from=card`,
    cancelUrl: `${page}?from=card`,
    customerEmail: payer?.email,
    expiresAtMs: order.checkout_expires_at_ms,
    idempotencyKey: `checkout-${order.id}`,
  }))
  await inTransaction(ctx.db, async (db) => {
    await updateOrder(db, order.id, { checkout_id: checkout.id, checkout_url: checkout.url })
    await updateReview(db, review.id, 'draft', { state: 'unpaid' })
  })
  return checkout.url
}

/** A provider that nobody can reach becomes a refusal that says what was kept. */
export async function reachingProvider<T>(work: () => Promise<T>): Promise<T> {
  try {
    return await work()
  }
  catch (error) {
    if (error instanceof PaymentsUnavailable) throw providerUnavailable()
    throw error
  }
}
