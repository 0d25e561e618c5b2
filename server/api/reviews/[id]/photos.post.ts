import type { PhotoBrief } from '#shared/types/reviews'
import { idParams } from '#shared/schemas/common'
import { newPhotoQuery, PHOTO_MAX_BYTES } from '#shared/schemas/photos'
import { addPhoto, checkPhotoWanted } from '#server/features/photos/photo.service'
import { answer } from '#server/utils/answer'
import { signedIn } from '#server/utils/guards'
import { readParams, readQuery } from '#server/utils/input'
import { readUpload } from '#server/utils/read-upload'

const FORM = { maxBytes: PHOTO_MAX_BYTES, maxFiles: 1 }

export default defineEventHandler(event => answer(event, async (): Promise<PhotoBrief> => {
  const ctx = await signedIn(event, 'student')
  const { id } = readParams(event, idParams, 'review')
  const { kind } = readQuery(event, newPhotoQuery)
  await checkPhotoWanted(ctx, id)
  return addPhoto(ctx, { reviewId: id, kind, uploads: await readUpload(event, FORM) })
}, { status: 201, form: FORM }))
