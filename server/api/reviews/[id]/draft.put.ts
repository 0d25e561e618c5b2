import type { DraftView } from '#shared/types/reviews'
import { idParams } from '#shared/schemas/common'
import { saveDraftSchema } from '#shared/schemas/letters'
import { saveDraft } from '#server/features/reviews/letter.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readJson, readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<DraftView> => {
  const ctx = await signedIn(event, 'coach')
  const { id } = readParams(event, idParams, 'review')
  return saveDraft(ctx, { id, ...await readJson(event, saveDraftSchema) })
}))
