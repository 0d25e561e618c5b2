import { FILM_MAX_BYTES } from '#shared/domain/film/limits'
import type { PictureSize } from './picture-size'

/** Bits for each pixel of a frame at 30 a second, where every third frame is a key frame: a thin shaft stays a line. */
const BITS_PER_PIXEL_AT_30 = 0.2
/** A film as the phone wrote it has one key frame a second; with ten, keeping what it shows takes about this much more. */
const OVER_SOURCE = 3
const LEAST_BITS_PER_SECOND = 400_000
/** Leaves room for an encoder that does not keep quite to what it was told. */
const SHARE_OF_LARGEST_FILE = 0.8

/**
 * Bits a second for the new film.
 *
 * Grows with the root of the frame rate: neighbouring frames of a faster film differ less. Never more than three times what
 * the source spends, nor so much that the film would be over the size that is taken.
 *
 * @param film size as prepared; frames a second as the file plays; how long the new film is, in seconds
 * @param source bytes and seconds of the whole original
 */
export function bitsPerSecondFor(
  { widthPx, heightPx, framesPerSecond, durationS }: PictureSize & { framesPerSecond: number, durationS: number },
  source: { bytes: number, durationS: number },
): number {
  const wanted = BITS_PER_PIXEL_AT_30 * widthPx * heightPx * Math.sqrt(30 * framesPerSecond)
  const ofSource = source.durationS > 0 ? OVER_SOURCE * 8 * source.bytes / source.durationS : Infinity
  const thatFits = durationS > 0 ? SHARE_OF_LARGEST_FILE * 8 * FILM_MAX_BYTES / durationS : Infinity
  return Math.round(Math.min(Math.max(Math.min(wanted, ofSource), LEAST_BITS_PER_SECOND), thatFits))
}
