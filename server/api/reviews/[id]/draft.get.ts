import type { DraftView } from '#shared/types/reviews'
import { idParams } from '#shared/schemas/common'
import { readDraft } from '#server/features/reviews/letter.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<DraftView> => {
  const ctx = await signedIn(event, 'coach')
  return readDraft(ctx, readParams(event, idParams, 'review'))
}))
