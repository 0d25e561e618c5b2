import type { Page } from '#shared/types/answers'
import type { ReviewRow } from '#shared/types/reviews'
import { reviewListQuery } from '#shared/schemas/reviews'
import { listReviews } from '#server/features/reviews/review.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readQuery } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<Page<ReviewRow>> => {
  const ctx = await signedIn(event)
  return listReviews(ctx, readQuery(event, reviewListQuery))
}))
