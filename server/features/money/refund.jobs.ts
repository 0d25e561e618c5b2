import { PaymentsRefused } from '#server/adapters/payments'
import type { Ctx } from '#server/context'
import { inTransaction } from '#server/database/transaction'
import { queueLetter } from '#server/features/mail/outbox.service'
import type { RefundRecord } from './refund.repository'
import { listRefundsDue, markRefundDone, markRefundFailed, postponeRefund } from './refund.repository'
import { settleOrder } from './settle.service'

const MINUTE_MS = 60_000
const DAY_MS = 24 * 60 * MINUTE_MS
const BATCH = 10

/** Gives back what is due. The refund's id is its key at the provider, so a second try gives nothing twice. */
export async function giveMoneyBack(ctx: Ctx): Promise<void> {
  for (const refund of await listRefundsDue(ctx.db, ctx.nowMs, BATCH)) {
    await giveOne(ctx, refund).catch(error => ctx.log.error({ refundId: refund.id, err: error }, 'refund not given'))
  }
}

async function giveOne(ctx: Ctx, refund: RefundRecord): Promise<void> {
  if (refund.payment_id === null) return fail(ctx, refund, 'The order has no payment.')
  try {
    if (!await wasGiven(ctx, refund, refund.payment_id)) {
      await ctx.payments.refund({ paymentIntentId: refund.payment_id, amountMinor: refund.amount_minor, metadata: { refund: refund.id } }, `refund-${refund.id}`)
    }
  }
  catch (error) {
    if (error instanceof PaymentsRefused) return fail(ctx, refund, error.message)
    const attempts = refund.attempts + 1
    const waitMs = Math.min(MINUTE_MS * 2 ** attempts, 6 * 60 * MINUTE_MS)
    await inTransaction(ctx.db, db => postponeRefund(db, refund.id, attempts, ctx.nowMs + waitMs, 'The card provider could not be reached.'))
    return
  }
  await inTransaction(ctx.db, async (db) => {
    await markRefundDone(db, refund.id, ctx.nowMs)
    if (refund.student_id === null) return
    await queueLetter(db, ctx, { letter: 'money-back', event: refund.id, subjectId: refund.id, to: { userId: refund.student_id } })
  })
  await settleOrder(ctx, refund.order_id)
}

/** The provider forgets keys after a day; from then on its list of refunds tells whether an earlier try went through. */
async function wasGiven(ctx: Ctx, refund: RefundRecord, paymentId: string): Promise<boolean> {
  if (refund.attempts === 0 || ctx.nowMs - refund.created_at_ms < DAY_MS / 2) return false
  return (await ctx.payments.listRefunds(paymentId)).some(given => given.metadata.refund === refund.id && given.status !== 'failed' && given.status !== 'canceled')
}

async function fail(ctx: Ctx, refund: RefundRecord, reason: string): Promise<void> {
  ctx.log.error({ refundId: refund.id, reason }, 'refund refused for good')
  await inTransaction(ctx.db, db => markRefundFailed(db, refund.id, reason))
}
