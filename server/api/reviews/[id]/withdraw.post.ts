import type { ReviewView } from '#shared/types/reviews'
import { emptySchema, idParams } from '#shared/schemas/common'
import { withdrawReview } from '#server/features/reviews/withdraw.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readJson, readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<ReviewView> => {
  const ctx = await signedIn(event, 'student', 'guardian', 'owner')
  await readJson(event, emptySchema)
  return withdrawReview(ctx, readParams(event, idParams, 'review'))
}))
