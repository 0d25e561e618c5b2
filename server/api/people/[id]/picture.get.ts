import { sendRedirect, setResponseHeader } from 'h3'
import { idParams } from '#shared/schemas/common'
import { getPictureAddress } from '#server/features/people/picture.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<void> => {
  const ctx = await signedIn(event)
  const { id } = readParams(event, idParams, 'picture')
  const address = await getPictureAddress(ctx, id)
  // Well within the life of the address, and short enough that a new picture is soon seen.
  setResponseHeader(event, 'Cache-Control', 'private, max-age=60')
  await sendRedirect(event, address, 302)
}))
