import { refundLines, saleLines, valuesOfSeries } from '#shared/domain/money/ledger'
import type { PaymentIntentSnapshot } from '#server/adapters/payments'
import type { Ctx } from '#server/context'
import type { Database } from '#server/database/client'
import { queueLetter } from '#server/features/mail/outbox.service'
import { deleteUnspentCredits, findCreditOfOrder, insertCredit } from '#server/features/offers/credit.repository'
import { enterQueue } from '#server/features/reviews/enter-queue'
import { findReview, updateReview } from '#server/features/reviews/review.repository'
import { newId } from '#server/ids'
import { insertMovement } from './ledger.repository'
import type { OrderRecord } from './order.repository'
import { findOpenOrder, updateOrder } from './order.repository'
import { insertRefund, sumWantedMinor } from './refund.repository'

/** An open order was paid: money in, credits to the student, the review into the queue; or the money back when there is nothing left to pay for. */
export async function applyPaid(db: Database, ctx: Ctx, order: OrderRecord, payment: PaymentIntentSnapshot): Promise<void> {
  const review = order.review_id === null ? undefined : await findReview(db, order.review_id)
  // A student who went back to the draft keeps what was paid as a credit, to send the review with when it is ready.
  const isForNothing = order.kind === 'single' && review?.state !== 'unpaid' && review?.state !== 'draft'
  await updateOrder(db, order.id, { state: isForNothing ? 'duplicate' : 'paid', payment_id: payment.id, settled_at_ms: ctx.nowMs })
  await insertMovement(db, {
    id: `sale:${order.id}`, reason: 'sale', lines: saleLines(order.amount_minor), currency: order.currency,
    order_id: order.id, review_id: null, coach_id: null, at_ms: ctx.nowMs,
  })
  if (isForNothing) {
    await wantBack(db, ctx, order, review === undefined || review.state === 'withdrawn' ? 'nothing-to-pay-for' : 'paid-twice')
    return
  }
  await grantCredits(db, ctx, order)
  if (order.student_id !== null) {
    await queueLetter(db, ctx, { letter: 'receipt', event: order.id, subjectId: order.id, to: { userId: order.student_id } })
  }
  const credit = await findCreditOfOrder(db, order.id)
  if (review?.state !== 'unpaid' || !credit) return
  await enterQueue(db, ctx, review, {
    credit,
    from: 'unpaid',
    // The page was closed by then, so however late we hear of it, it was paid before.
    atMs: Math.min(ctx.nowMs, order.checkout_expires_at_ms),
    quote: { promisedAtMs: order.quoted_promise_at_ms, quotedAtMs: order.quoted_at_ms },
  })
}

async function grantCredits(db: Database, ctx: Ctx, order: OrderRecord): Promise<void> {
  if (order.student_id === null) return
  for (const valueMinor of valuesOfSeries(order.amount_minor, order.review_count)) {
    await insertCredit(db, {
      id: newId(ctx.nowMs), student_id: order.student_id, offer_version_id: order.offer_version_id, granted_at_ms: ctx.nowMs,
      order_id: order.id, value_minor: valueMinor,
    })
  }
}

/** A page closed without payment: the review is a draft again, unless another page of it is open. */
export async function applyExpired(db: Database, ctx: Ctx, order: OrderRecord): Promise<void> {
  await updateOrder(db, order.id, { state: 'expired', settled_at_ms: ctx.nowMs })
  if (order.review_id === null || await findOpenOrder(db, order.review_id)) return
  await updateReview(db, order.review_id, 'unpaid', { state: 'draft' })
}

/** What has gone back to the card since we last looked, by us or at the provider, and whether the bank disputes the payment. */
export async function applyGivenBack(db: Database, ctx: Ctx, order: OrderRecord, payment: PaymentIntentSnapshot): Promise<void> {
  if (payment.isDisputed && order.disputed_at_ms === null) await updateOrder(db, order.id, { disputed_at_ms: ctx.nowMs })
  const moreMinor = payment.refundedMinor - order.refunded_minor
  if (order.state === 'open' || moreMinor <= 0) return
  await updateOrder(db, order.id, { refunded_minor: payment.refundedMinor })
  await insertMovement(db, {
    id: `refund:${order.id}:${payment.refundedMinor}`, reason: 'refund', lines: refundLines(moreMinor), currency: order.currency,
    order_id: order.id, review_id: null, coach_id: null, at_ms: ctx.nowMs,
  })
  if (payment.refundedMinor >= order.amount_minor) await deleteUnspentCredits(db, order.id)
}

/** Money that is to go back to the card; a job gives it, as often as it takes. */
export async function wantBack(
  db: Database, ctx: Ctx, order: Pick<OrderRecord, 'id' | 'amount_minor' | 'refunded_minor'>, reason: 'paid-twice' | 'withdrawn' | 'nothing-to-pay-for', amountMinor = order.amount_minor,
): Promise<void> {
  const leftMinor = order.amount_minor - order.refunded_minor - await sumWantedMinor(db, order.id)
  const backMinor = Math.min(amountMinor, leftMinor)
  if (backMinor <= 0) return
  await insertRefund(db, {
    id: newId(ctx.nowMs), order_id: order.id, amount_minor: backMinor, reason, state: 'wanted', due_at_ms: ctx.nowMs, created_at_ms: ctx.nowMs, done_at_ms: null,
  })
  ctx.pokesAfterWrite.add('money:refund')
}
