import type { z } from 'zod'
import type { ReviewView } from '#shared/types/reviews'
import type { submitSchema } from '#shared/schemas/reviews'
import { completeReviewSchema } from '#shared/schemas/reviews'
import type { SignedInCtx } from '#server/context'
import type { Database } from '#server/database/client'
import { recordDeed } from '#server/features/audit'
import { checkFilmConsent } from '#server/features/film/consent'
import { queueLetter } from '#server/features/mail/outbox.service'
import { recipientsOf } from '#server/features/mail/recipients'
import { listCoaches } from '#server/features/people/coach.repository'
import { findOldestCredit, spendCredit } from '#server/features/offers/credit.repository'
import { beginAnswerClock } from '#server/features/turnaround/turnaround.service'
import { invalidFields, notFound } from '#server/refusal'
import { fieldErrors } from '#server/utils/input'
import { write } from '#server/write'
import { listClips } from './clip.repository'
import { cardNotOpen, clipNotReady, noClipYet, noCreditLeft, wrongMoment } from './review.errors'
import type { ReviewRecord } from './review.repository'
import { updateReview } from './review.repository'
import { getReviewRecord } from './review.service'
import { viewReview } from './review.view'

/**
 * Sends a draft to the queue and pays with the student's oldest credit: credit, clock, promise and letters in one transaction.
 * @throws Refusal with what is missing.
 */
export async function submitReview(ctx: SignedInCtx, input: z.output<typeof submitSchema> & { id: string }): Promise<ReviewView> {
  if (input.payBy === 'card') throw cardNotOpen()
  return write(ctx, async (db) => {
    const record = await getReviewRecord(db, ctx, input.id)
    if (record.student_id !== ctx.viewer.id) throw notFound('review')
    if (record.state !== 'draft') throw wrongMoment('This review was sent already.')
    checkWords(record)
    await checkFilmConsent(db, ctx, record.student_id)
    await checkClips(db, record.id)
    const credit = await findOldestCredit(db, record.student_id)
    if (!credit) throw noCreditLeft()
    await spendCredit(db, credit.id, record.id, ctx.nowMs)
    await updateReview(db, record.id, 'draft', { state: 'waiting', submitted_at_ms: ctx.nowMs, offer_version_id: credit.offer_version_id })
    await beginAnswerClock(db, ctx, { reviewId: record.id, chosenCoachId: record.chosen_coach_id, turnaroundMs: credit.turnaround_ms })
    await tellEverybody(db, ctx, record)
    await recordDeed(db, ctx, 'review-submitted', record.id)
    return viewReview(db, ctx, await getReviewRecord(db, ctx, record.id))
  })
}

/** The student's side hears of the promise; the chosen coach, or every coach who takes reviews, hears of the review. */
async function tellEverybody(db: Database, ctx: SignedInCtx, record: ReviewRecord): Promise<void> {
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

function checkWords({ title, question, club }: ReviewRecord): void {
  const checked = completeReviewSchema.safeParse({ title, question, club })
  if (!checked.success) throw invalidFields(fieldErrors(checked.error))
}

async function checkClips(db: Database, reviewId: string): Promise<void> {
  const clips = await listClips(db, reviewId)
  if (clips.some(clip => clip.state === 'uploading' || clip.state === 'reading')) throw clipNotReady()
  if (!clips.some(clip => clip.state === 'accepted')) throw noClipYet()
}
