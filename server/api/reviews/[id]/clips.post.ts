import type { ClipUpload } from '#shared/types/reviews'
import { newClipSchema } from '#shared/schemas/clips'
import { idParams } from '#shared/schemas/common'
import { startClip } from '#server/features/film/upload.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readJson, readParams } from '#server/utils/input'

export default defineEventHandler(event => answer(event, async (): Promise<ClipUpload> => {
  const ctx = await signedIn(event, 'student')
  const { id } = readParams(event, idParams, 'review')
  return startClip(ctx, { reviewId: id, ...await readJson(event, newClipSchema) })
}, { status: 201 }))
