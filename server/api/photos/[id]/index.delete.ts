import type { Done } from '#shared/types/answers'
import { idParams } from '#shared/schemas/common'
import { removePhoto } from '#server/features/photos/photo.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<Done> => {
  const ctx = await signedIn(event, 'student')
  return removePhoto(ctx, readParams(event, idParams, 'photograph'))
}))
