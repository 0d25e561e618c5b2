import { sendRedirect } from 'h3'
import { idParams } from '#shared/schemas/common'
import { getPhotoAddress } from '#server/features/photos/photo.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<void> => {
  const ctx = await signedIn(event)
  await sendRedirect(event, await getPhotoAddress(ctx, readParams(event, idParams, 'photograph')), 302)
}))
