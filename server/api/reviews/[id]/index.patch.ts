import type { ReviewView } from '#shared/types/reviews'
import { idParams } from '#shared/schemas/common'
import { changeReviewSchema } from '#shared/schemas/reviews'
import { changeReview } from '#server/features/reviews/review.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readJson, readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<ReviewView> => {
  const ctx = await signedIn(event, 'student')
  const { id } = readParams(event, idParams, 'review')
  return changeReview(ctx, { id, change: await readJson(event, changeReviewSchema) })
}))
