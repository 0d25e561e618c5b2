import type { ClipBrief } from '#shared/types/reviews'
import { idParams } from '#shared/schemas/common'
import { swingsSchema } from '#shared/schemas/swings'
import { changeSwings } from '#server/features/film/swing.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readJson, readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<ClipBrief> => {
  const ctx = await signedIn(event, 'student')
  const { id } = readParams(event, idParams, 'clip')
  return changeSwings(ctx, { id, ...await readJson(event, swingsSchema) })
}))
