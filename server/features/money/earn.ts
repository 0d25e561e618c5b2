import { earnedLines } from '#shared/domain/money/ledger'
import type { Ctx } from '#server/context'
import type { Database } from '#server/database/client'
import { findSpentCredit } from '#server/features/offers/credit.repository'
import { findCoachShare } from '#server/features/people/coach.repository'
import { insertMovement } from './ledger.repository'

/** An answer earns what its review was paid with, split by the coach's share. A review that was given away earns nothing. */
export async function earnReview(db: Database, ctx: Ctx, input: { reviewId: string, coachId: string }): Promise<void> {
  const credit = await findSpentCredit(db, input.reviewId)
  if (!credit?.order_id || credit.value_minor === 0) return
  await insertMovement(db, {
    // The first answer earns; a second one to the same review is part of the same price.
    id: `earned:${input.reviewId}`,
    reason: 'earned',
    lines: earnedLines(credit.value_minor, await findCoachShare(db, input.coachId)),
    currency: credit.currency,
    order_id: credit.order_id,
    review_id: input.reviewId,
    coach_id: input.coachId,
    at_ms: ctx.nowMs,
  })
}
