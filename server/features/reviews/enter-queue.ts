import type { Quote } from '#shared/domain/turnaround/promise'
import type { ReviewState } from '#shared/domain/review/states'
import type { Ctx } from '#server/context'
import type { Database } from '#server/database/client'
import { recordDeed } from '#server/features/audit'
import { queueLetter } from '#server/features/mail/outbox.service'
import { recipientsOf } from '#server/features/mail/recipients'
import { spendCredit } from '#server/features/offers/credit.repository'
import { listCoaches } from '#server/features/people/coach.repository'
import { beginAnswerClock } from '#server/features/turnaround/turnaround.service'
import type { ReviewRecord } from './review.repository'
import { updateReview } from './review.repository'

export interface Entry {
  credit: { id: string, offer_version_id: string, turnaround_ms: number }
  from: Extract<ReviewState, 'draft' | 'unpaid'>
  /** The moment of payment, or of spending the credit. */
  atMs: number
  /** The promise that was shown before paying, when there was one. */
  quote?: Quote
}

/** Puts a review into the queue: credit, clock, promise and letters together, in the caller's transaction. */
export async function enterQueue(db: Database, ctx: Ctx, record: ReviewRecord, { credit, from, atMs, quote }: Entry): Promise<void> {
  await spendCredit(db, credit.id, record.id, atMs)
  await updateReview(db, record.id, from, { state: 'waiting', submitted_at_ms: atMs, offer_version_id: credit.offer_version_id })
  await beginAnswerClock(db, ctx, {
    reviewId: record.id, chosenCoachId: record.chosen_coach_id, turnaroundMs: credit.turnaround_ms, atMs, quote,
  })
  await tellEverybody(db, ctx, record)
  await recordDeed(db, ctx, 'review-submitted', record.id, record.student_id)
}

/** The student's side hears of the promise; the chosen coach, or every coach who takes reviews, hears of the review. */
async function tellEverybody(db: Database, ctx: Ctx, record: ReviewRecord): Promise<void> {
  for (const { userId } of await recipientsOf(db, record.student_id)) {
    await queueLetter(db, ctx, { letter: 'review-sent', event: record.id, subjectId: record.id, to: { userId } })
  }
  const coachIds = record.chosen_coach_id === null
    ? (await listCoaches(db)).filter(coach => coach.is_open === 1).map(coach => coach.id)
    : [record.chosen_coach_id]
  for (const userId of coachIds) {
    await queueLetter(db, ctx, { letter: 'review-waiting', event: record.id, subjectId: record.id, to: { userId } })
  }
}
