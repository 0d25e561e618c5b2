import type { ClipBrief } from '#shared/types/reviews'
import { emptySchema, idParams } from '#shared/schemas/common'
import { completeClip } from '#server/features/film/film.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readJson, readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<ClipBrief> => {
  const ctx = await signedIn(event, 'student')
  await readJson(event, emptySchema)
  return completeClip(ctx, readParams(event, idParams, 'clip'))
}))
