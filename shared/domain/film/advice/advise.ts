import type { AdvisedFilm, Advice, FilmContext } from './context'
import { adviseOnDuration, adviseOnHeadTravel, adviseOnSlowMotion } from './frames-advice'
import { adviseOnLight, adviseOnMirror, adviseOnPicture, adviseOnScale } from './picture-advice'
import { findSlowMotion } from './slow-motion'

/** What can be changed stands where it is read first. */
const TONES: readonly Advice['tone'][] = ['improve', 'ask', 'good']

/**
 * Advice on a film before it is sent. It never blocks: `judge.ts` alone says what is not taken.
 *
 * Frames of real time a second: 120 and above (less 1 %) are fine for impact, 60 to 120 show positions, under 60 impact
 * may be missing; a head as slow as a putter's is fine with fewer. Nothing is said of what a file does not show: the
 * lens (wide or not), the exposure, the light of a film nobody looked at.
 *
 * @param film any numbers, those that make no sense get no advice
 * @returns things to improve first, then questions, then what is good; at most one of each key
 */
export function adviseOnFilm(film: AdvisedFilm, context: FilmContext): Advice[] {
  const finding = findSlowMotion({
    framesPerSecond: film.framesPerSecond,
    captureFramesPerSecond: film.captureFramesPerSecond,
    saidFramesPerSecond: context.saidFramesPerSecond,
    // A putt and a chip have no downswing of a full swing's length.
    downswingFileS: context.club === 'putter' ? undefined : context.downswingFileS,
  })
  // Without a rate in the file most films play as they were filmed; with a contradiction no rate can be trusted.
  const factor = finding.kind !== 'ask' ? finding.realTimeFactor : finding.reason === 'no-rate-in-file' ? 1 : undefined
  const found = [
    factor === undefined ? undefined : adviseOnHeadTravel(film.framesPerSecond / factor, context),
    factor === undefined ? undefined : adviseOnDuration(film.durationMs / 1000 * factor),
    adviseOnSlowMotion(film, finding),
    ...adviseOnPicture(film),
    adviseOnLight(film, context),
    adviseOnMirror(film, context),
    ...adviseOnScale(film, context),
  ].filter(advice => advice !== undefined)
  return TONES.flatMap(tone => found.filter(advice => advice.tone === tone))
}
