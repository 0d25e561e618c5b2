import type { ReviewView } from '#shared/types/reviews'
import { newReviewSchema } from '#shared/schemas/reviews'
import { startReview } from '#server/features/reviews/review.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readJson } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<ReviewView> => {
  const ctx = await signedIn(event, 'student')
  return startReview(ctx, await readJson(event, newReviewSchema))
}, { status: 201 }))
