import { movesFrom } from '#shared/domain/review/states'
import type { ReviewView } from '#shared/types/reviews'
import type { SignedInCtx } from '#server/context'
import type { Database } from '#server/database/client'
import { recordDeed } from '#server/features/audit'
import { wantBack } from '#server/features/money/apply-payment'
import { findOrder } from '#server/features/money/order.repository'
import { returnFromPage } from '#server/features/money/settle.service'
import { findSpentCredit, giveCreditBack } from '#server/features/offers/credit.repository'
import { stopAnswerClock } from '#server/features/turnaround/turnaround.service'
import { write } from '#server/write'
import { wrongMoment } from './review.errors'
import { rolesFor } from './review.policy'
import type { ReviewRecord } from './review.repository'
import { updateReview } from './review.repository'
import { getReviewRecord } from './review.service'
import { reviewFacts, viewReview } from './review.view'

/**
 * Takes a review back before it is answered. Until a coach has taken it up everything comes back: a prepaid review as one to use again, a single one
 * as money on the card. Afterwards the coach's time is spent, and nothing comes back unless the owner withdraws it.
 */
export async function withdrawReview(ctx: SignedInCtx, { id }: { id: string }): Promise<ReviewView> {
  // A page that is still open must not be paid for a review that is gone.
  if ((await getReviewRecord(ctx.db, ctx, id)).state === 'unpaid') await returnFromPage(ctx, { id })
  return write(ctx, async (db) => {
    const record = await getReviewRecord(db, ctx, id)
    if (record.state === 'withdrawn') return viewReview(db, ctx, record)
    const mayWithdraw = rolesFor(ctx.viewer).some(role => movesFrom(record.state, role, reviewFacts(record)).includes('withdraw'))
    if (!mayWithdraw) throw wrongMoment('This review can no longer be withdrawn.')
    const wasSent = record.submitted_at_ms !== null
    await updateReview(db, id, record.state, { state: 'withdrawn', state_before_new_film: null, closed_at_ms: ctx.nowMs })
    if (wasSent) await stopAnswerClock(db, ctx, id)
    if (wasSent && (record.taken_up_at_ms === null || ctx.viewer.role === 'owner')) await giveBack(db, ctx, record)
    await recordDeed(db, ctx, 'review-withdrawn', id)
    return viewReview(db, ctx, await getReviewRecord(db, ctx, id))
  })
}

async function giveBack(db: Database, ctx: SignedInCtx, record: ReviewRecord): Promise<void> {
  const credit = await findSpentCredit(db, record.id)
  if (!credit) return
  const order = credit.order_id === null ? undefined : await findOrder(db, credit.order_id)
  if (order?.kind === 'single') await wantBack(db, ctx, order, 'withdrawn', credit.value_minor)
  else await giveCreditBack(db, credit.id)
}
