import { sendRedirect } from 'h3'
import { idParams } from '#shared/schemas/common'
import { showFilm } from '#server/features/film/film.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<void> => {
  const ctx = await signedIn(event)
  const url = await showFilm(ctx, readParams(event, idParams, 'clip'))
  await sendRedirect(event, url, 302)
}))
