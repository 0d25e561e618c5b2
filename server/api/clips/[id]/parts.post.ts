import type { PartsAnswer } from '#shared/types/reviews'
import { partsSchema } from '#shared/schemas/clips'
import { idParams } from '#shared/schemas/common'
import { refreshParts } from '#server/features/film/upload.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readJson, readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<PartsAnswer> => {
  const ctx = await signedIn(event, 'student')
  const { id } = readParams(event, idParams, 'clip')
  return refreshParts(ctx, { id, ...await readJson(event, partsSchema) })
}))
