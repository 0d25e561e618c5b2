import type { SubmitAnswer } from '#shared/types/reviews'
import { idParams } from '#shared/schemas/common'
import { submitSchema } from '#shared/schemas/reviews'
import { submitReview } from '#server/features/reviews/submit.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readJson, readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<SubmitAnswer> => {
  const ctx = await signedIn(event, 'student')
  const { id } = readParams(event, idParams, 'review')
  return submitReview(ctx, { id, ...await readJson(event, submitSchema) })
}))
