import { z } from 'zod'
import { FILM_MAX_DURATION_MS } from '#shared/domain/film/limits'
import { CONTACTS, FLIGHT_CURVES, FLIGHT_HEIGHTS, FLIGHT_STARTS, SURFACES } from '#shared/domain/review/ball-results'
import { carrySchema } from './profile'

export const SWING_MAX_COUNT = 6

const momentSchema = z.number().int('Whole milliseconds.').min(0, 'A swing begins in the clip.').max(FILM_MAX_DURATION_MS, 'A clip lasts a minute at most.')

/** Times are milliseconds of the clip as it plays, half-open; null for what the student does not know. */
export const swingSchema = z.object({
  fromMs: momentSchema,
  toMs: momentSchema,
  contact: z.enum(CONTACTS).nullable(),
  flight: z.object({ start: z.enum(FLIGHT_STARTS), curve: z.enum(FLIGHT_CURVES), height: z.enum(FLIGHT_HEIGHTS) }).nullable(),
  carryM: carrySchema.nullable(),
  surface: z.enum(SURFACES).nullable(),
}).superRefine(({ fromMs, toMs }, context) => {
  if (toMs <= fromMs) context.addIssue({ code: 'custom', path: ['toMs'], message: 'A swing ends after it begins.' })
})

/** `PUT /api/clips/:id/swings`: all of a clip's swings, in order. That they lie within the clip, only the server knows. */
export const swingsSchema = z.object({
  swings: z.array(swingSchema)
    .min(1, 'Keep at least one swing.')
    .max(SWING_MAX_COUNT, `A clip holds at most ${SWING_MAX_COUNT} swings.`)
    .superRefine((swings, context) => {
      swings.forEach(({ fromMs }, index) => {
        const before = swings[index - 1]
        if (before && fromMs < before.toMs) context.addIssue({ code: 'custom', path: [index, 'fromMs'], message: 'A swing begins after the one before it ends.' })
      })
    }),
})
export type SwingInput = z.infer<typeof swingSchema>
