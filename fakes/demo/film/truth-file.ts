import { readFileSync } from 'node:fs'
import { z } from 'zod'
import type { FilmClipName } from './clips'
import { madeClipPath } from './clips'
import { MARKS } from './marks'
import { POSITIONS } from './swing-kinds'

/** Marks are kept as whole hundred-thousandths of the frame's width and height. */
export const QUANTUM = 1e5

const point = z.tuple([z.number(), z.number()])

const trackSchema = z.object({
  /** Fractions of the frame times `QUANTUM`, one a frame. */
  x: z.array(z.int()),
  y: z.array(z.int()),
  /** Half-open ranges of frames in which something lies before the mark, or it is outside the picture. */
  hidden: z.array(z.tuple([z.int(), z.int()])),
})

/** What is known of a clip because it was made: beside each `<name>.mp4`, as `<name>.json`. */
export const truthSchema = z.object({
  name: z.string(),
  view: z.enum(['face_on', 'down_the_line']),
  hands: z.enum(['right', 'left']),
  club: z.enum(['7-iron', 'driver']),
  clubLengthMm: z.number(),
  framesPerSecond: z.number(),
  widthPx: z.int(),
  heightPx: z.int(),
  camera: z.object({ toBallMm: z.number(), lensHeightMm: z.number(), offSquareDeg: z.number(), mmPerPixelAtBall: z.number() }),
  /** Times of the frames in ticks of the file's clock, and the same in seconds. */
  timescale: z.int(),
  ticks: z.array(z.int()),
  seconds: z.array(z.number()),
  swings: z.array(z.object({
    release: z.enum(['sound', 'early']),
    contact: z.enum(['solid', 'fat', 'thin']),
    /** Real time of each position, in seconds from the first frame. */
    positionsS: z.record(z.enum(POSITIONS), z.number()),
  })),
  /** Two points on a true vertical. */
  level: z.object({ foot: point, top: point }),
  /** Two points a known length apart on the ground, across the picture; how far their line lies behind the ball as seen from the lens. */
  scale: z.object({ from: point, to: point, lengthMm: z.number(), behindBallMm: z.number() }),
  marks: z.record(z.enum(MARKS), trackSchema),
  /** Largest distance of a mark's truth from where the drawing put it, over all frames. */
  drawnWithinPx: z.number(),
})

export type Truth = z.infer<typeof truthSchema>

/** @throws when the clip was not rendered or its truth is not in the shape above. */
export function readTruth(name: FilmClipName): Truth {
  return truthSchema.parse(JSON.parse(readFileSync(madeClipPath(name, 'json'), 'utf8')))
}
