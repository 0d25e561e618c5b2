import { likelyAt } from '#shared/domain/turnaround/likely'
import { QUOTE_HOLDS_MS, promiseFor } from '#shared/domain/turnaround/promise'
import type { OfferList, PromiseQuote } from '#shared/types/offers'
import type { Ctx } from '#server/context'
import { findCoach } from '#server/features/people/coach.repository'
import { listReviewTimesMs } from '#server/features/reviews/review.repository'
import { listPromisesAhead } from '#server/features/reviews/queue.repository'
import { getCalendarFor } from '#server/features/turnaround/calendars'
import { notFound } from '#server/refusal'
import { findSoldOffer, listSoldOffers } from './offer.repository'

/** Until a coach has answered enough here to have a median of their own. */
const USUAL_REVIEW_MS = 20 * 60_000
const ENOUGH_REVIEWS = 5
const LAST_REVIEWS = 20
/** Longer queues are not sold into anyway. */
const QUEUE_LOOKED_AT = 500

/** What is sold now, with prices and turnarounds. */
export async function listOffers(ctx: Ctx): Promise<OfferList> {
  const rows = await listSoldOffers(ctx.db)
  return {
    items: rows.map(row => ({
      id: row.offer_id,
      name: row.name,
      kind: row.kind,
      reviewCount: row.review_count,
      priceMinor: row.price_minor,
      currency: row.currency,
      turnaroundMs: row.turnaround_ms,
      followUpsIncluded: row.follow_ups_included,
    })),
  }
}

/**
 * The promise that a review bought now would get, and when it is likely to be answered. Not available when the coach takes
 * no reviews, has no hours within a year, or would likely answer after the promise.
 */
export async function quotePromise(ctx: Ctx, input: { offerId: string, coachId: string | undefined }): Promise<PromiseQuote> {
  const offer = await findSoldOffer(ctx.db, input.offerId)
  if (!offer) throw notFound('offer')
  const coach = input.coachId === undefined ? undefined : await findCoach(ctx.db, input.coachId)
  if (input.coachId !== undefined && !coach) throw notFound('coach')

  const coachId = input.coachId ?? null
  const { calendar } = await getCalendarFor(ctx.db, coachId)
  const promise = promiseFor({ calendar, startMs: ctx.nowMs, turnaroundMs: offer.turnaround_ms })
  const answer = { quotedUntilMs: ctx.nowMs + QUOTE_HOLDS_MS, coachName: coach?.name ?? null, timeZone: calendar.timeZone }
  if (!promise.ok) return { ...answer, promisedAtMs: null, likelyAtMs: null, available: false }

  const workMs = await usualReviewMs(ctx, coachId)
  const ahead = await listPromisesAhead(ctx.db, coachId, QUEUE_LOOKED_AT)
  const likely = likelyAt({
    calendar,
    nowMs: ctx.nowMs,
    promisedAtMs: promise.atMs,
    workMs,
    queue: ahead.map(row => ({ promisedAtMs: row.promised_at_ms, workMs, isInHand: row.state === 'in_hand' })),
  })
  const isOpen = coach === undefined || coach.is_open === 1
  return {
    ...answer,
    promisedAtMs: promise.atMs,
    likelyAtMs: likely.ok ? likely.likelyAtMs : null,
    available: isOpen && likely.ok && likely.isInTime,
  }
}

/** The median of the coach's last reviews, from taking up to sending; the lower of the two middle ones of an even number. */
async function usualReviewMs(ctx: Ctx, coachId: string | null): Promise<number> {
  const times = coachId === null ? [] : await listReviewTimesMs(ctx.db, coachId, LAST_REVIEWS)
  if (times.length < ENOUGH_REVIEWS) return USUAL_REVIEW_MS
  return [...times].sort((a, b) => a - b)[Math.floor((times.length - 1) / 2)] ?? USUAL_REVIEW_MS
}
