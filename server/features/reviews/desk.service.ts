import type { ReviewMove } from '#shared/domain/review/states'
import { nextState } from '#shared/domain/review/states'
import type { ReviewView } from '#shared/types/reviews'
import type { SignedInCtx } from '#server/context'
import { recordDeed } from '#server/features/audit'
import { write } from '#server/write'
import { alreadyInHand, wrongMoment } from './review.errors'
import type { ReviewRecord } from './review.repository'
import { updateReview } from './review.repository'
import { getReviewRecord } from './review.service'
import { reviewFacts, viewReview } from './review.view'

/**
 * A coach starts on a review. One coach has it at a time: the first to commit. Taking up what one has already is no error.
 * @throws Refusal `already-in-hand` with the name of the coach who has it.
 */
export async function takeUp(ctx: SignedInCtx, { id }: { id: string }): Promise<ReviewView> {
  return write(ctx, async (db) => {
    const record = await getReviewRecord(db, ctx, id)
    if (record.state === 'in_hand' && record.coach_id === ctx.viewer.id) return viewReview(db, ctx, record)
    if (record.state === 'in_hand') throw alreadyInHand(record.coach_name ?? 'Another coach')
    if (record.chosen_coach_id !== null && record.chosen_coach_id !== ctx.viewer.id) {
      throw wrongMoment(`The student asked for ${record.chosen_name ?? 'another coach'}.`)
    }
    checkMove(record, 'take-up', 'This review does not wait for a coach.')
    await updateReview(db, id, 'waiting', { state: 'in_hand', coach_id: ctx.viewer.id, taken_up_at_ms: ctx.nowMs })
    await recordDeed(db, ctx, 'review-taken-up', id)
    return viewReview(db, ctx, await getReviewRecord(db, ctx, id))
  })
}

/** Gives a review back to the queue; the promise stands and the coach's own draft is kept. */
export async function putBack(ctx: SignedInCtx, { id }: { id: string }): Promise<ReviewView> {
  return write(ctx, async (db) => {
    const record = await getReviewRecord(db, ctx, id)
    checkInHand(record, ctx)
    await updateReview(db, id, 'in_hand', { state: 'waiting', coach_id: null, taken_up_at_ms: null })
    await recordDeed(db, ctx, 'review-put-back', id)
    return viewReview(db, ctx, await getReviewRecord(db, ctx, id))
  })
}

/** @throws Refusal unless the review is in this coach's hands. */
export function checkInHand(record: ReviewRecord, ctx: SignedInCtx): void {
  if (record.state !== 'in_hand') throw wrongMoment('Take this review up first.')
  if (record.coach_id !== ctx.viewer.id) throw alreadyInHand(record.coach_name ?? 'Another coach')
}

function checkMove(record: ReviewRecord, move: ReviewMove, message: string): void {
  if (!nextState(record.state, move, reviewFacts(record)).ok) throw wrongMoment(message)
}
