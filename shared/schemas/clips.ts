import { z } from 'zod'
import { FILM_MAX_BYTES, FILM_MAX_FRAMES_PER_SECOND } from '#shared/domain/film/limits'
import { requiredText } from './common'

/** Parts of 8 MiB; the store takes no part under 5 MiB but the last. */
export const PART_BYTES = 8 * 1024 * 1024
export const PART_MAX_COUNT = Math.ceil(FILM_MAX_BYTES / PART_BYTES)

/** What the device did to a clip before sending: made anew, cut frame by frame, copied without sound and tags, or nothing. */
export const PREPARED_AS = ['re_encoded', 'cut', 'remuxed', 'original'] as const

/** `POST /api/reviews/:id/clips`. */
export const newClipSchema = z.object({
  view: z.enum(['face_on', 'down_the_line']),
  fileName: requiredText(200),
  bytes: z.number().int().min(1, 'This file is empty.').max(FILM_MAX_BYTES, 'A clip may be 500 MB at most. Keep only the swings and send it again.'),
  contentType: z.enum(['video/mp4', 'video/quicktime', 'video/webm'], 'This is not a video that can be read. MP4, MOV and WebM can.'),
  /** Rate at which a phone filmed slow motion; preparing a clip takes out the tag that told it. */
  captureFramesPerSecond: z.number().min(1).max(FILM_MAX_FRAMES_PER_SECOND).optional(),
  preparedAs: z.enum(PREPARED_AS).optional(),
})

/** `POST /api/clips/:id/parts`: the numbers for which fresh addresses are wanted. */
export const partsSchema = z.object({
  numbers: z.array(z.number().int().min(1).max(PART_MAX_COUNT)).max(PART_MAX_COUNT).default([]),
})
