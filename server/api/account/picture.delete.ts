import type { Viewer } from '#shared/types/people'
import { removePicture } from '#server/features/people/picture.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'

export default defineEventHandler(event => answer(event, async (): Promise<Viewer> => {
  return removePicture(await signedIn(event))
}))
