import type { Viewer } from '#shared/types/people'
import { changePicture, takePictureAllowance } from '#server/features/people/picture.service'
import { readUpload } from '#server/utils/read-upload'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'

const MAX_BYTES = 8 * 1024 * 1024

export default defineEventHandler(event => answer(event, async (): Promise<Viewer> => {
  const ctx = await signedIn(event)
  await takePictureAllowance(ctx)
  return changePicture(ctx, await readUpload(event, { maxBytes: MAX_BYTES, maxFiles: 1 }))
}))
