import type { Done } from '#shared/types/answers'
import { idParams } from '#shared/schemas/common'
import { giveUpClip } from '#server/features/film/upload.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<Done> => {
  const ctx = await signedIn(event, 'student')
  return giveUpClip(ctx, readParams(event, idParams, 'clip'))
}))
