import { z } from 'zod'
import { PROBLEM_AREAS } from '#shared/domain/review/problem-areas'
import { idSchema, pageQuery, requiredText, text } from './common'

export const problemAreaSchema = z.enum(PROBLEM_AREAS)

export const TITLE_MAX_LENGTH = 120
export const QUESTION_MAX_LENGTH = 2000
export const SHORT_TEXT_MAX_LENGTH = 500

/** `POST /api/reviews`: everything may come later; a draft is never refused for being thin. */
export const newReviewSchema = z.object({
  title: text(TITLE_MAX_LENGTH).default(''),
  question: text(QUESTION_MAX_LENGTH).default(''),
  area: problemAreaSchema.default('full_swing'),
  club: text(40).default('7-iron'),
  misses: text(SHORT_TEXT_MAX_LENGTH).default(''),
  tried: text(SHORT_TEXT_MAX_LENGTH).default(''),
  /** Null or absent: the first coach who is free. */
  chosenCoachId: idSchema.nullable().default(null),
})

/** `PATCH /api/reviews/:id`: a draft's fields, any of them. */
export const changeReviewSchema = z.object({
  title: text(TITLE_MAX_LENGTH).optional(),
  question: text(QUESTION_MAX_LENGTH).optional(),
  area: problemAreaSchema.optional(),
  club: text(40).optional(),
  misses: text(SHORT_TEXT_MAX_LENGTH).optional(),
  tried: text(SHORT_TEXT_MAX_LENGTH).optional(),
  chosenCoachId: idSchema.nullable().optional(),
})
export type ChangeReview = z.infer<typeof changeReviewSchema>

/** What a review must hold to be sent to a coach. */
export const completeReviewSchema = z.object({
  title: requiredText(TITLE_MAX_LENGTH, 'Give your question a title.'),
  question: requiredText(QUESTION_MAX_LENGTH, 'Say what you want to know.'),
  club: requiredText(40, 'Say which club.'),
})

/** `POST /api/reviews/:id/submit`. */
export const submitSchema = z.object({
  /** Needed to pay by card; a credit knows what it was sold as. */
  offerId: idSchema.optional(),
  payBy: z.enum(['credit', 'card']).default('credit'),
  /** The price that was shown, so that nobody pays another one unseen. */
  priceMinor: z.number().int().min(0).optional(),
})

/** `GET /api/reviews`. */
export const reviewListQuery = pageQuery.extend({
  state: z.enum(['open', 'answered', 'all']).default('all'),
})

export const queueQuery = pageQuery

/** `GET /api/offers/:id/promise`. */
export const promiseQuery = z.object({ coach: idSchema.optional() })
