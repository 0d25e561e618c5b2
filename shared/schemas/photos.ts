import { z } from 'zod'
import { PHOTO_KINDS } from '#shared/domain/review/photo-kinds'

/** A photograph as phones take it, before it is made small. */
export const PHOTO_MAX_BYTES = 16 * 1024 * 1024

/** `POST /api/reviews/:id/photos?kind=`: the picture itself comes as the form's field `photo`. */
export const newPhotoQuery = z.object({
  kind: z.enum(PHOTO_KINDS, 'Say what the photograph shows.'),
})
