import type { z } from 'zod'
import type { Page } from '#shared/types/answers'
import type { ReviewRow, ReviewView } from '#shared/types/reviews'
import type { ChangeReview, newReviewSchema, reviewListQuery } from '#shared/schemas/reviews'
import type { SignedInCtx } from '#server/context'
import type { Database } from '#server/database/client'
import { decodeCursor, toPage } from '#server/features/cursor'
import { findCoach } from '#server/features/people/coach.repository'
import { newId } from '#server/ids'
import { notFound } from '#server/refusal'
import { write } from '#server/write'
import { unknownCoach, wrongMoment } from './review.errors'
import type { ReviewRecord } from './review.repository'
import { findVisibleReview, insertReview, listVisibleReviews, nextReviewNumber, updateReview } from './review.repository'
import { viewReview } from './review.view'

/** @throws Refusal `not-found`, also for a review that is not the viewer's to see. */
export async function getReviewRecord(db: Database, ctx: SignedInCtx, id: string): Promise<ReviewRecord> {
  const record = await findVisibleReview(db, ctx.viewer, id)
  if (!record) throw notFound('review')
  return record
}

export async function readReview(ctx: SignedInCtx, { id }: { id: string }): Promise<ReviewView> {
  return viewReview(ctx.db, ctx, await getReviewRecord(ctx.db, ctx, id))
}

/** A new draft; however thin, it is kept. */
export async function startReview(ctx: SignedInCtx, input: z.output<typeof newReviewSchema>): Promise<ReviewView> {
  await checkCoach(ctx, input.chosenCoachId)
  return write(ctx, async (db) => {
    const id = newId(ctx.nowMs)
    await insertReview(db, {
      id,
      student_id: ctx.viewer.id,
      number: await nextReviewNumber(db, ctx.viewer.id),
      state: 'draft',
      chosen_coach_id: input.chosenCoachId,
      title: input.title,
      question: input.question,
      area: input.area,
      club: input.club,
      misses: input.misses,
      tried: input.tried,
      created_at_ms: ctx.nowMs,
    })
    return viewReview(db, ctx, await getReviewRecord(db, ctx, id))
  })
}

/** Changes a draft's words. @throws Refusal `wrong-moment` once it was sent: what the coach reads stays as it was asked. */
export async function changeReview(ctx: SignedInCtx, input: { id: string, change: ChangeReview }): Promise<ReviewView> {
  const { chosenCoachId, ...words } = input.change
  if (chosenCoachId) await checkCoach(ctx, chosenCoachId)
  return write(ctx, async (db) => {
    const record = await getReviewRecord(db, ctx, input.id)
    if (record.student_id !== ctx.viewer.id) throw notFound('review')
    const change = { ...words, ...(chosenCoachId !== undefined && { chosen_coach_id: chosenCoachId }) }
    if (!await updateReview(db, record.id, 'draft', change)) throw wrongMoment('This review was sent already and can no longer be changed.')
    return viewReview(db, ctx, await getReviewRecord(db, ctx, record.id))
  })
}

const STATES_OF = {
  open: ['draft', 'unpaid', 'waiting', 'in_hand', 'new_film'],
  answered: ['answered', 'closed'],
  all: undefined,
} as const

/** Newest first, by page. */
export async function listReviews(ctx: SignedInCtx, query: z.output<typeof reviewListQuery>): Promise<Page<ReviewRow>> {
  const states = STATES_OF[query.state]
  const rows = await listVisibleReviews(ctx.db, ctx.viewer, {
    states: states ? [...states] : undefined,
    after: query.cursor === undefined ? undefined : decodeCursor(query.cursor),
    limit: query.limit,
  })
  return toPage(rows, query.limit, row => ({
    id: row.id,
    number: row.number,
    state: row.state,
    title: row.title,
    studentName: row.student_name,
    coachName: row.coach_name,
    club: row.club,
    promisedAtMs: row.promised_at_ms,
    answeredAtMs: row.answered_at_ms,
    createdAtMs: row.created_at_ms,
  }), row => ({ atMs: row.created_at_ms, id: row.id }))
}

async function checkCoach(ctx: SignedInCtx, coachId: string | null): Promise<void> {
  if (coachId !== null && !(await findCoach(ctx.db, coachId))?.is_open) throw unknownCoach()
}
