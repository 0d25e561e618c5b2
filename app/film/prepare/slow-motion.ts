import { findSlowMotion } from '#shared/domain/film/advice/slow-motion'
import type { FilmFacts } from '#shared/domain/film/reading'

/**
 * How many times slower than life a clip plays, as far as its tag tells: 240 frames a second that play at 30 are 8 times
 * slowed. 1 where nothing tells, though such a clip may be slowed too; then only who filmed it knows.
 */
export function slowedByOf({ captureFramesPerSecond, framesPerSecond }: Pick<FilmFacts, 'captureFramesPerSecond' | 'framesPerSecond'>): number {
  const found = findSlowMotion({ captureFramesPerSecond, framesPerSecond })
  return found.kind === 'slowed-by-known-factor' ? 1 / found.realTimeFactor : 1
}
