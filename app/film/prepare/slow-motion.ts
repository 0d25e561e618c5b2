import type { FilmFacts } from '#shared/domain/film/reading'

/** Android stretches film only when it was filmed at more than twice the rate that it plays at. */
const STRETCHED_FROM = 2

/**
 * How many times slower than life a clip plays, from its tag: 240 frames a second that play at 30 are 8 times slowed.
 * 1 without a tag, though such a clip may be slowed too; only who filmed it knows.
 */
export function slowedByOf({ captureFramesPerSecond, framesPerSecond }: Pick<FilmFacts, 'captureFramesPerSecond' | 'framesPerSecond'>): number {
  const ratio = (captureFramesPerSecond ?? 0) / framesPerSecond
  return Number.isFinite(ratio) && ratio >= STRETCHED_FROM ? ratio : 1
}
