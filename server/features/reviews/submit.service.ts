import type { z } from 'zod'
import type { SubmitAnswer } from '#shared/types/reviews'
import type { submitSchema } from '#shared/schemas/reviews'
import { completeReviewSchema } from '#shared/schemas/reviews'
import type { SignedInCtx } from '#server/context'
import type { Database } from '#server/database/client'
import { checkFilmConsent } from '#server/features/film/consent'
import { openCheckout } from '#server/features/money/checkout.service'
import { findOldestCredit } from '#server/features/offers/credit.repository'
import { invalidFields, notFound } from '#server/refusal'
import { fieldErrors } from '#server/utils/input'
import { write } from '#server/write'
import { listClips } from './clip.repository'
import { enterQueue } from './enter-queue'
import { clipNotReady, noClipYet, noCreditLeft, wrongMoment } from './review.errors'
import type { ReviewRecord } from './review.repository'
import { getReviewRecord } from './review.service'
import { viewReview } from './review.view'

/**
 * Sends a draft: with the student's oldest credit straight into the queue, by card to the provider's page, from which the payment puts it there.
 * @throws Refusal with what is missing.
 */
export async function submitReview(ctx: SignedInCtx, input: z.output<typeof submitSchema> & { id: string }): Promise<SubmitAnswer> {
  return input.payBy === 'card' ? submitByCard(ctx, input) : submitByCredit(ctx, input.id)
}

async function submitByCredit(ctx: SignedInCtx, id: string): Promise<SubmitAnswer> {
  return write(ctx, async (db) => {
    const record = await getOwnReady(db, ctx, id)
    if (record.state !== 'draft') throw wrongMoment('This review was sent already.')
    const credit = await findOldestCredit(db, record.student_id)
    if (!credit) throw noCreditLeft()
    await enterQueue(db, ctx, record, { credit, from: 'draft', atMs: ctx.nowMs })
    return { review: await viewReview(db, ctx, await getReviewRecord(db, ctx, id)), checkoutUrl: null }
  })
}

async function submitByCard(ctx: SignedInCtx, input: z.output<typeof submitSchema> & { id: string }): Promise<SubmitAnswer> {
  const record = await getOwnReady(ctx.db, ctx, input.id)
  if (record.state !== 'draft' && record.state !== 'unpaid') throw wrongMoment('This review was sent already.')
  if (input.offerId === undefined) throw invalidFields({ offerId: 'Choose what to buy.' })
  const checkoutUrl = await openCheckout(ctx, record, { offerId: input.offerId, priceMinor: input.priceMinor })
  return write(ctx, async db => ({ review: await viewReview(db, ctx, await getReviewRecord(db, ctx, input.id)), checkoutUrl }))
}

/** A review of the viewer's own that lacks nothing but payment. */
async function getOwnReady(db: Database, ctx: SignedInCtx, id: string): Promise<ReviewRecord> {
  const record = await getReviewRecord(db, ctx, id)
  if (record.student_id !== ctx.viewer.id) throw notFound('review')
  checkWords(record)
  await checkFilmConsent(db, ctx, record.student_id)
  await checkClips(db, record.id)
  return record
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
