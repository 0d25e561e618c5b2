import type { ReviewView } from '#shared/types/reviews'
import { idParams } from '#shared/schemas/common'
import { answerSchema } from '#shared/schemas/letters'
import { sendAnswer } from '#server/features/reviews/letter.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readJson, readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<ReviewView> => {
  const ctx = await signedIn(event, 'coach')
  const { id } = readParams(event, idParams, 'review')
  return sendAnswer(ctx, { id, ...await readJson(event, answerSchema) })
}))
