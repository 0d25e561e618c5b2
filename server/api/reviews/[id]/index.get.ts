import type { ReviewView } from '#shared/types/reviews'
import { idParams } from '#shared/schemas/common'
import { readReview } from '#server/features/reviews/review.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<ReviewView> => {
  const ctx = await signedIn(event)
  return readReview(ctx, readParams(event, idParams, 'review'))
}))
